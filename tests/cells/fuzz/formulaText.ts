/** Texts as people, accidents and enemies write them. */
type Next = () => number;

const names = ["Mg", "Si", "Al", "MgO", "SiO2", "FeOt", "Fe", "Group", "la", "`La (ppm)`", "ch.Mg", "CI", "BSE", "x1", "é", "度", "constructor", "__proto__"];
const numbers = ["0", "1", "2.5", ".5", "1e-9", "1e308", "007", "3.", "1e", "0x1f", "9".repeat(40)];
const calls = [
  "abs",
  "sqrt",
  "log10",
  "ln",
  "exp",
  "min",
  "max",
  "atoms",
  "mol",
  "oxide",
  "wtpct",
  "ugg",
  "norm",
  "at",
  "mean",
  "median",
  "sd",
  "se",
  "wmean",
  "count",
  "least",
  "most",
  "from_dex",
  "to_dex",
  "is_missing",
  "is_below",
  "as_wtpct",
  "toString",
  "eval",
];
const signs = [
  "+",
  "-",
  "*",
  "/",
  "^",
  "==",
  "!=",
  "<",
  "<=",
  ">",
  ">=",
  "and",
  "or",
  "not",
  "?",
  ":",
  "(",
  ")",
  ",",
  ".",
  "=",
  "!",
  ";",
  "/*",
  "*/",
  "//",
  "#",
  "\n",
  "%",
  "&&",
  "||",
  "[",
  "]",
  "{",
  "}",
];
const texts = ['"A"', "'A'", '"', "'", '"a\\"b"', '"\u202e"', '""'];
const nasty = ["\u0000", "\u2028", "\ufeff", "\u200b", "\u202e", "é", "e\u0301", "−", "×", "·", "²", "𝒙", "\ud800", "½", "Å", "µ", "μ", "\t", "\r\n", "  "];

const of = <T>(list: readonly T[], next: Next): T => list[Math.floor(next() * list.length)] as T;

/** An expression of the language, mostly in order. */
function expression(next: Next, depth: number): string {
  const kind = depth <= 0 ? next() * 0.3 : next();
  if (kind < 0.2) return of(names, next);
  if (kind < 0.3) return of(numbers, next);
  const inner = (): string => expression(next, depth - 1);
  if (kind < 0.6) return `${inner()} ${of(signs.slice(0, 5), next)} ${inner()}`;
  if (kind < 0.7) return `(${inner()})`;
  if (kind < 0.75) return `-${inner()}`;
  if (kind < 0.8) return `${inner()} ${of(signs.slice(5, 13), next)} ${inner()} ? ${inner()} : ${inner()}`;
  if (kind < 0.84) return `Group == ${of(texts, next)} ? ${inner()} : ${inner()}`;
  const call = of(calls, next);
  const more = next() < 0.4 ? `, ${next() < 0.5 ? of(["CI", "BSE", "Group", '"A"', "NOWHERE"], next) : inner()}` : "";
  return `${call}(${inner()}${more})`;
}

function soup(next: Next): string {
  const parts = Array.from({ length: 1 + Math.floor(next() * 40) }, () => of(of([names, numbers, calls, signs, texts, nasty], next), next));
  return parts.join(next() < 0.5 ? " " : "");
}

function spoilt(text: string, next: Next): string {
  let result = text;
  for (let n = 1 + Math.floor(next() * 4); n > 0; n--) {
    const at = Math.floor(next() * (result.length + 1));
    const cut = next() < 0.5 ? Math.floor(next() * 4) : 0;
    const put = next() < 0.7 ? of(of([signs, nasty, names, texts], next), next) : "";
    result = result.slice(0, at) + put + result.slice(at + cut);
  }
  return result;
}

function heap(next: Next): string {
  const one = of(["(", "-", "abs(", "1+", "Mg/", "not ", "1?", "a.", "'", "`", "9", "^2", "min(1,"], next);
  return one.repeat(1 + Math.floor(next() ** 3 * 4000)) + (next() < 0.5 ? "1" : "");
}

function anything(next: Next): string {
  return String.fromCharCode(...Array.from({ length: Math.floor(next() * 60) }, () => Math.floor(next() < 0.7 ? next() * 128 : next() * 65_536)));
}

/** One text of any of these sorts. */
export function formulaText(next: Next): string {
  const sort = next();
  if (sort < 0.35) return expression(next, 1 + Math.floor(next() * 5));
  if (sort < 0.7) return spoilt(expression(next, 1 + Math.floor(next() * 4)), next);
  if (sort < 0.9) return soup(next);
  return sort < 0.95 ? heap(next) : anything(next);
}
