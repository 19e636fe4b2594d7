/** A number a person typed: a true minus and a decimal point are fine, an ambiguous `1,234` is not. */
export type TypedNumber = { readonly value: number } | { readonly problem: string } | { readonly empty: true };

const form = /^[-+]?(\d+\.?\d*|\.\d+)(e[-+]?\d+)?$/iu;

export function readNumber(text: string): TypedNumber {
  const clean = text.trim().replaceAll("−", "-");
  if (clean === "") return { empty: true };
  if (clean.includes(",")) return { problem: `“${text.trim()}” can be read two ways. Write the decimal sign as a point.` };
  if (!form.test(clean)) return { problem: `“${text.trim()}” is no number.` };
  return { value: Number(clean) };
}

/** A value with an optional 1σ, written as `32.3`, `32.3 ± 0.5`, `32.3 +- 0.5` or `32.3(5)`. */
export function readUncertain(text: string): { readonly value: number; readonly sigma?: number } | { readonly problem: string } | { readonly empty: true } {
  const clean = text.trim();
  const concise = /^([-+−]?\d+(?:\.(\d+))?)\((\d+(?:\.\d+)?)\)$/u.exec(clean);
  if (concise !== null) {
    const value = readNumber(concise[1] ?? "");
    const digits = concise[3] ?? "";
    const decimals = concise[2]?.length ?? 0;
    if ("value" in value) return { value: value.value, sigma: digits.includes(".") ? Number(digits) : Number(`${digits}e-${decimals}`) };
  }
  const parts = clean.split(/\s*(?:±|\+\/?-)\s*/u);
  const value = readNumber(parts[0] ?? "");
  if (!("value" in value) || parts.length === 1) return value;
  const sigma = readNumber(parts.slice(1).join(""));
  if ("problem" in sigma) return sigma;
  if ("empty" in sigma) return value;
  return sigma.value < 0 ? { problem: "A σ is never negative." } : { value: value.value, sigma: sigma.value };
}
