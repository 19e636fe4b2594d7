import Link from "next/link";
import { sizeInWords } from "@/app/_page/times";
import { Section } from "@/app/_site/Sheet";
import { When } from "@/app/_site/When";
import type { Member } from "@/db/queries/groups";
import type { PageOfGroup } from "@/db/queries/pages";
import type { SourceOfGroup } from "@/db/queries/sources";

/** People of the group, as the margin of its home names them. */
export function PeopleList({ members, me, groupId }: { readonly members: readonly Member[]; readonly me: string | null; readonly groupId: string }) {
  return (
    <Section id="people" title="People" beside={<Link href={`/groups/${groupId}/people`}>roles and invitations</Link>}>
      <ul>
        {members.map((member) => (
          <li key={member.userId} className="flex justify-between gap-4 border-b border-hairline pt-[5px] pb-1.5 pl-3">
            <span>
              {member.name}
              <span className="block text-margin text-second">
                {member.userId === me ? (
                  "you"
                ) : member.lastSeenAt ? (
                  <>
                    last here <When iso={member.lastSeenAt.toISOString()} />
                  </>
                ) : (
                  "not here yet"
                )}
              </span>
            </span>
            <span className="text-margin text-second">{member.role}</span>
          </li>
        ))}
      </ul>
    </Section>
  );
}

/** Sources of the group, with how many pages use each. */
export function SourceList({ sources, pages }: { readonly sources: readonly SourceOfGroup[]; readonly pages: readonly PageOfGroup[] }) {
  const used = (sha256: string) => pages.filter((page) => page.outline.some((block) => block.source === sha256)).length;
  return (
    <Section id="sources" title="Sources" beside="kept byte for byte">
      {sources.length === 0 ? <p className="pl-3 text-second">None yet. Add a data block to a page and give it a file.</p> : null}
      <ul>
        {sources.map((source) => {
          const n = used(source.sha256);
          return (
            <li key={source.sha256} className="flex justify-between gap-4 border-b border-hairline pt-[5px] pb-1.5 pl-3">
              <span className="min-w-0">
                <span className="block truncate font-mono text-cell leading-5">{source.name}</span>
                <span className="block text-margin text-second">
                  {source.rows === null ? sizeInWords(source.size) : `${source.rows} ${source.rows === 1 ? "row" : "rows"}`},{" "}
                  <When iso={source.uploadedAt.toISOString()} />
                </span>
              </span>
              <span className="text-margin whitespace-nowrap text-second">{n === 0 ? "no page" : n === 1 ? "1 page" : `${n} pages`}</span>
            </li>
          );
        })}
      </ul>
    </Section>
  );
}
