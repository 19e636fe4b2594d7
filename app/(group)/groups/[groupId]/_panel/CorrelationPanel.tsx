import Link from "next/link";
import { blockKinds } from "@/cells";
import { RailPatterns } from "@/app/_page/rail/RailPatterns";
import { When } from "@/app/_site/When";
import { KindSwatch } from "@/app/_ui/KindSwatch";
import type { PageOfGroup } from "@/db/queries/pages";
import type { SourceOfGroup } from "@/db/queries/sources";
import { COLUMN, layOut, orderBySources, PITCH } from "./layOut";
import { PageMenu } from "./PageMenu";
import { SectionColumn, SourceBand } from "./Section";

export interface CorrelationPanelProps {
  readonly pages: readonly PageOfGroup[];
  readonly sources: readonly SourceOfGroup[];
  /** Whether this person may copy and archive pages. */
  readonly edits: boolean;
}

/** Room for two lines of title and one of who changed it. */
const HEAD = 88;
const FOOT = 48;

/** The pages of a group side by side, each drawn as its own section; bands join the layers that use one source. */
export function CorrelationPanel({ pages, sources, edits }: CorrelationPanelProps) {
  const ordered = orderBySources(pages);
  const { columns, bands } = layOut(ordered, sources);
  const height = Math.max(40, ...columns.map((column) => column.height));
  const width = (columns.length - 1) * PITCH + COLUMN + 72;
  return (
    <>
      <div className="-ml-1 overflow-x-auto pt-4 pl-1" tabIndex={0} role="region" aria-label="Pages side by side">
        <div className="relative" style={{ width, height: HEAD + height + FOOT }}>
          <svg className="absolute left-0 overflow-visible" style={{ top: HEAD }} width={width} height={height + 1} aria-hidden="true">
            <RailPatterns />
            {bands.map((band, n) => (
              <SourceBand key={n} band={band} />
            ))}
            {columns.map((column) => (
              <SectionColumn key={column.pageId} column={column} />
            ))}
          </svg>
          <ul>
            {ordered.map((page, n) => (
              <PageColumn key={page.id} page={page} x={n * PITCH} height={columns[n]?.height ?? 0} edits={edits} />
            ))}
          </ul>
        </div>
      </div>
      <div className="mt-2 flex flex-wrap items-baseline gap-x-6 gap-y-1 text-margin text-second">
        {blockKinds.map((kind) => (
          <span key={kind} className="inline-flex items-center gap-2">
            <KindSwatch kind={kind} />
            {kind}
          </span>
        ))}
        <span className="ml-auto">lines join the same source; dashed where a page holds another version of it</span>
      </div>
    </>
  );
}

function PageColumn({ page, x, height, edits }: { readonly page: PageOfGroup; readonly x: number; readonly height: number; readonly edits: boolean }) {
  const blocks = page.outline.length === 0 ? "no blocks yet" : page.outline.length === 1 ? "1 block" : `${page.outline.length} blocks`;
  return (
    <li className="group absolute top-0" style={{ left: x, width: PITCH - 24 }}>
      <div className="flex flex-col" style={{ height: HEAD }}>
        <Link href={`/pages/${page.id}`} className="line-clamp-2 font-serif text-[18px] leading-[22px] font-medium text-ink no-underline hover:underline">
          {page.title || "Untitled page"}
        </Link>
        <span className="mt-1 flex items-center gap-2 text-margin text-second">
          <span className="truncate">
            <When iso={page.changedAt.toISOString()} />
            {page.changedBy ? `, ${page.changedBy}` : ""}
          </span>
          {edits ? <PageMenu pageId={page.id} title={page.title} archived={false} /> : null}
        </span>
      </div>
      <Link
        href={`/pages/${page.id}`}
        tabIndex={-1}
        aria-hidden="true"
        className="block hover:bg-[color-mix(in_srgb,var(--indigo)_8%,transparent)]"
        style={{ width: COLUMN, height }}
      />
      <p className="mt-2 text-margin text-second">
        {blocks}
        <br />
        {page.frozenAs === null ? "never frozen" : `frozen as no. ${page.frozenAs}`}
      </p>
    </li>
  );
}
