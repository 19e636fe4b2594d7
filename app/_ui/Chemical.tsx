import { Fragment } from "react";

/** A species or column name with its numbers lowered: SiO₂, Al₂O₃. Names that are no formula stay as they are. */
export function Chemical({ name }: { readonly name: string }) {
  if (!/^([A-Z][a-z]?\d*)+[a-z]?$/.test(name) || !/\d/.test(name)) return <>{name}</>;
  const parts = name.split(/(\d+)/);
  return (
    <>
      {parts.map((part, i) =>
        /^\d+$/.test(part) ? (
          <sub key={i} className="text-[0.74em] leading-none">
            {part}
          </sub>
        ) : (
          <Fragment key={i}>{part}</Fragment>
        ),
      )}
    </>
  );
}
