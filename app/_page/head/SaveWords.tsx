"use client";

import { usePage } from "../pageContext";

/** "Saved 14:32": on the database's disk. What is refused is said in the problem colour, with its reason. */
export function SaveWords() {
  const save = usePage((s) => s.save);
  const mode = usePage((s) => s.mode);
  const calculating = usePage((s) => s.calculating);
  const words = save?.text ?? (mode === "read" ? "Read only" : "");
  return (
    <span
      role="status"
      className={`max-w-[46ch] truncate phone:ml-auto phone:max-w-[60%] phone:text-right ${save?.kind === "refused" ? "text-vermilion" : "text-second"}`}
      title={words}
    >
      {words}
      {calculating ? <span className="ml-3 narrow:hidden">calculating</span> : null}
    </span>
  );
}
