/** A piece of an expression's text. `start` and `end` are UTF-16 code units of the text as it was given. */
export type Token = NumberToken | NameToken | TextToken | SymbolToken;

interface AnyToken {
  readonly start: number;
  readonly end: number;
}

export interface NumberToken extends AnyToken {
  readonly kind: "number";
  readonly value: number;
}

export interface NameToken extends AnyToken {
  readonly kind: "name";
  /** In Unicode normal form C, without backticks. */
  readonly name: string;
  /** What stands after the point of `block.name`. */
  readonly member?: string;
}

export interface TextToken extends AnyToken {
  readonly kind: "text";
  readonly text: string;
}

/** Operators, brackets, commas, and the words `and`, `or`, `not`. */
export interface SymbolToken extends AnyToken {
  readonly kind: "symbol";
  readonly symbol: string;
}

export const reservedWords: ReadonlySet<string> = new Set(["and", "or", "not"]);

const plainName = /^[\p{L}_][\p{L}\p{M}\p{N}_]*$/u;

/** A name as an expression must write it: in backticks unless it is letters, digits and `_`. */
export function writeName(name: string): string {
  return plainName.test(name) && !reservedWords.has(name) ? name : `\`${name}\``;
}

/** True for a name that can stand without backticks. */
export function isPlainName(name: string): boolean {
  return plainName.test(name) && !reservedWords.has(name);
}
