import type { ReactNode } from "react";

/** A narrow screen with one thing to do: signing in, an invitation, a sentence about what went wrong. */
export function Sheet({ title, says, children }: { readonly title: string; readonly says?: ReactNode; readonly children?: ReactNode }) {
  return (
    <main className="mx-auto max-w-[520px] px-4 pt-16 pb-16 narrow:pt-8">
      <h1 className="font-serif text-title-phone font-medium">{title}</h1>
      {says ? <div className="mt-3 text-second">{says}</div> : null}
      <div className="mt-8">{children}</div>
    </main>
  );
}

/** A section of a screen: a line, a small heading, and what belongs beside it. */
export function Section({
  title,
  beside,
  children,
  id,
}: {
  readonly title: string;
  readonly beside?: ReactNode;
  readonly children: ReactNode;
  readonly id: string;
}) {
  return (
    <section aria-labelledby={id}>
      <div className="flex items-baseline justify-between gap-4 border-t border-ink pt-[7px] pb-2">
        <h2 id={id} className="text-block font-semibold">
          {title}
        </h2>
        {beside ? <div className="text-margin text-second">{beside}</div> : null}
      </div>
      {children}
    </section>
  );
}
