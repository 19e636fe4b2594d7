/** Classes of a table's rows as numbers: entry i of `codes` is a place in `names`. */
export interface ClassCodes {
  readonly names: readonly string[];
  readonly codes: Uint16Array;
}

const known = new WeakMap<readonly string[], ClassCodes>();

/** Names of classes in order of first appearance, and each row's place among them; remembered, as tables never change. */
export function classCodes(classes: readonly string[]): ClassCodes {
  let found = known.get(classes);
  if (found === undefined) {
    const places = new Map<string, number>();
    const codes = new Uint16Array(classes.length);
    for (let row = 0; row < classes.length; row++) {
      const name = classes[row] ?? "";
      let place = places.get(name);
      if (place === undefined) places.set(name, (place = places.size));
      codes[row] = place;
    }
    known.set(classes, (found = { names: [...places.keys()], codes }));
  }
  return found;
}
