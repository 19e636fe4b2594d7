import { formatValue, speakValue, withUnit, writeValue, type WritingOptions } from "./concise";

export interface ValueProps extends WritingOptions {
  readonly value: number | null;
  readonly sigma: number | null;
  readonly unit?: string;
  readonly className?: string;
}

/** A number with its 1σ in the person's form, σ in second ink; read out as "plus or minus". */
export function Value({ value, sigma, unit = "", className, ...options }: ValueProps) {
  const written = writeValue(value, sigma, options);
  return (
    <span className={`font-mono whitespace-nowrap ${className ?? ""}`}>
      <span aria-hidden="true">
        {written.power !== "" && options.form === "plus-minus" ? (
          withUnit(formatValue(value, sigma, options), unit)
        ) : (
          <>
            {written.value}
            <span className="text-second">{written.sigma}</span>
            {withUnit(written.power, unit)}
          </>
        )}
      </span>
      <span className="sr-only">{withUnit(speakValue(value, sigma), unit)}</span>
    </span>
  );
}
