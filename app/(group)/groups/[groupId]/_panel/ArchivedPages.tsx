import Link from "next/link";
import { When } from "@/app/_site/When";
import type { PageOfGroup } from "@/db/queries/pages";
import { PageMenu } from "./PageMenu";

/** Pages in the archive, folded away. */
export function ArchivedPages({ pages, edits }: { readonly pages: readonly PageOfGroup[]; readonly edits: boolean }) {
  if (pages.length === 0) return null;
  return (
    <details className="mt-4">
      <summary className="text-second">
        {pages.length} archived {pages.length === 1 ? "page" : "pages"}
      </summary>
      <ul className="mt-2">
        {pages.map((page) => (
          <li key={page.id} className="flex items-baseline gap-3 border-b border-hairline py-1.5">
            <Link href={`/pages/${page.id}`} className="font-serif text-note-narrow text-ink no-underline hover:underline">
              {page.title || "Untitled page"}
            </Link>
            {page.archivedAt ? (
              <span className="text-margin text-second">
                archived <When iso={page.archivedAt.toISOString()} />
              </span>
            ) : null}
            {edits ? <PageMenu pageId={page.id} title={page.title} archived /> : null}
          </li>
        ))}
      </ul>
    </details>
  );
}
