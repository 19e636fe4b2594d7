"use client";

import { usePage } from "../pageContext";

/** Who is on the page: a tick in each person's colour, always with the name. One person in several tabs is named once. */
export function People() {
  const present = usePage((s) => s.present);
  const blocks = usePage((s) => s.blocks);
  const once = [...new Map([...present].reverse().map((p) => [p.userId, p])).values()].sort((a, b) => Number(a.isMe) - Number(b.isMe));
  if (once.length === 0) return null;
  const shown = once.slice(0, 4);
  return (
    <ul aria-label="People on this page" className="flex gap-4">
      {shown.map((person) => {
        const handle = blocks.find((b) => b.key === person.block)?.block.id;
        return (
          <li key={person.userId} className="inline-flex items-center gap-1.5">
            <i className="inline-block h-3.5 w-[3px]" style={{ background: person.color }} />
            {person.isMe ? "you" : (person.name.split(/\s+/)[0] ?? person.name)}
            {!person.isMe && handle !== undefined ? <span className="text-second narrow:hidden">in {handle}</span> : null}
          </li>
        );
      })}
      {once.length > shown.length ? <li className="text-second">and {once.length - shown.length} more</li> : null}
    </ul>
  );
}
