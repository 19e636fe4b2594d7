import Link from "next/link";
import { shortHash } from "@/app/_page/times";
import { When } from "@/app/_site/When";
import type { snapshotsOf } from "@/db/queries/snapshots";

export type SnapshotLine = Awaited<ReturnType<typeof snapshotsOf>>[number];

/** The snapshots of a group, newest first. */
export function SnapshotList({ snapshots }: { readonly snapshots: readonly SnapshotLine[] }) {
  return (
    <div className="overflow-x-auto">
      <table className="w-full border-collapse text-left">
        <thead>
          <tr className="border-b border-axis text-margin text-second">
            {["no.", "page", "frozen", "hash", "reading links"].map((head) => (
              <th key={head} scope="col" className="pr-4 pb-1 font-normal">
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {snapshots.map((snapshot) => (
            <tr key={snapshot.id} className="border-b border-hairline align-baseline">
              <td className="w-12 py-[7px] pr-4 font-serif text-[20px] leading-5 font-medium">{snapshot.number}</td>
              <td className="py-[7px] pr-4">
                <Link href={`/snapshots/${snapshot.id}`} className="font-serif text-note-narrow text-ink no-underline hover:underline">
                  {snapshot.title || "Untitled page"}
                </Link>
              </td>
              <td className="py-[7px] pr-4 whitespace-nowrap">
                <When iso={snapshot.frozenAt.toISOString()} as="day" />
              </td>
              <td className="py-[7px] pr-4 font-mono text-cell whitespace-nowrap">{shortHash(snapshot.hash)}</td>
              <td className="py-[7px]">
                <Links snapshot={snapshot} />
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

function Links({ snapshot }: { readonly snapshot: SnapshotLine }) {
  const { openLinks, endedLinks, lastLinkEnds } = snapshot;
  if (openLinks === 0) return <span className="text-second">{endedLinks > 0 ? "none open any more" : "none"}</span>;
  return (
    <>
      {openLinks} {openLinks === 1 ? "link" : "links"}
      {lastLinkEnds ? (
        <>
          , until <When iso={new Date(lastLinkEnds).toISOString()} as="day" />
        </>
      ) : null}
    </>
  );
}
