import fc from "fast-check";
import type { Block, PageDocument } from "@/cells";

/** Arbitrary page documents: every kind of block, every list, empty lists and absent ones, odd characters. */
const word = fc.string({ minLength: 1, maxLength: 12, unit: "binary" }).map((s) => s.replaceAll("\u0000", "·"));
const handle = fc.stringMatching(/^[a-zé_][a-z0-9_]{0,8}$/);
const row = fc.oneof(fc.integer({ min: 1, max: 5000 }), fc.stringMatching(/^[a-z]{1,6}$/));
const number = fc.double({ noNaN: true, noDefaultInfinity: true }).map((v) => (Object.is(v, -0) ? 0 : v));
const by = { by: fc.constantFrom("p1", "p2"), at: fc.constantFrom("2026-01-02T03:04:05.000Z", "2026-02-03T04:05:06.000Z") };

/** Objects as JSON makes them. */
const plain = { noNullPrototype: true } as const;

/** A record whose optional keys are sometimes left out and never `undefined`. */
function some<R extends object, O extends object>(required: { [K in keyof R]: fc.Arbitrary<R[K]> }, optional: { [K in keyof O]: fc.Arbitrary<O[K]> }) {
  return fc.tuple(fc.record(required, plain), fc.record(optional, { requiredKeys: [], ...plain })).map(([a, b]) => ({ ...a, ...b }));
}
const list = <T>(entry: fc.Arbitrary<T>) => fc.array(entry, { maxLength: 4 });
const title = { formerly: list(handle), name: word, width: fc.constantFrom(4, 6, 8, 12) };

const amendment = some({ row, sample: word, column: word, was: word, value: word, reason: word }, by);
const setAside = some({ row, reason: word }, { sample: word, column: word, ...by });
const assumed = some({ column: word, relative: fc.double({ min: 1e-9, max: 10, noNaN: true }), reason: word }, by);
const column = some(
  { role: fc.constantFrom("sample", "class", "text", "quantity") },
  { header: word, name: word, position: fc.integer({ min: 1, max: 9 }), species: word, unit: word },
);
const typedRow = fc.record({
  id: fc.stringMatching(/^[a-z]{1,2}$/),
  cells: fc.dictionary(fc.stringMatching(/^[A-Z][a-z0-9]{0,4}$/), word, { maxKeys: 3, ...plain }),
});
const source = some({ file: word }, { sha256: fc.stringMatching(/^[0-9a-f]{64}$/) });
const content = fc.oneof(
  fc.record({ source }),
  fc.record({ typed: list(typedRow) }),
  fc.record({ stack: fc.array(handle, { minLength: 1, maxLength: 3 }) }),
  fc.record({ join: fc.array(handle, { minLength: 2, maxLength: 3 }) }),
);
const correlation = fc.record({
  of: fc.tuple(word, word),
  value: fc.oneof(
    fc.double({ min: -1, max: 1, noNaN: true }).map((v) => v + 0),
    word,
  ),
});
const data = fc
  .tuple(
    content,
    some(
      { kind: fc.constant("data"), id: handle },
      {
        ...title,
        columns: list(column),
        assumed: list(assumed),
        amendments: list(amendment),
        setAside: list(setAside),
        correlations: list(correlation),
        totals: fc.record({ from: number, to: number }),
        renormalise: fc.constant("volatile-free"),
      },
    ),
  )
  .map(([a, b]) => ({ ...a, ...b }));
const text = fc.oneof(word, fc.constant("mg_si = Mg / Si\nal_si = Al / Si"), fc.constant("αβγ 🜨 \ud83d\ude00"));
const simulate = fc.record({ draws: fc.integer({ min: 200, max: 50_000 }), seed: fc.integer({ min: 0, max: 999_999_999 }) });
const formula = some({ kind: fc.constant("formula"), id: handle, text }, { ...title, data: handle, simulate });
const note = some({ kind: fc.constant("note"), id: handle, text }, title);
const trend = some(
  { kind: fc.constant("trend"), id: handle, data: handle, x: word, y: word, method: fc.constantFrom("york", "ordinary least squares") },
  { ...title, where: word, leaveOut: list(some({ row, reason: word }, { sample: word, ...by })), crossWith: handle, simulate },
);
const substance = fc.oneof(
  fc.record({ body: word }),
  fc.record({ data: handle, row }),
  fc.record({ composition: fc.dictionary(fc.stringMatching(/^[A-Z][a-z]? wt%$/), number, { maxKeys: 2, ...plain }) }),
);
const step = fc.oneof(
  fc.record({ do: fc.constantFrom("add", "remove", "mix"), what: substance, amount: fc.oneof(fc.constant("solve"), fc.record({ value: number })) }),
  fc.record({
    do: fc.constant("share with metal"),
    species: word,
    metalFraction: fc.record({ value: number }),
    amount: fc.record({ from: number, to: number }),
  }),
);
const budget = some(
  { kind: fc.constant("budget"), id: handle, start: substance, steps: list(step) },
  { ...title, report: list(word), target: fc.record({ trend: handle }), simulate },
);
const drawn = fc.oneof(
  some({ data: handle }, { x: word, y: word, hidden: fc.boolean() }),
  fc.record({ trend: handle }),
  fc.record({ bodies: list(word) }),
  fc.record({ annotation: word, x: number, y: number }),
);
const plot = some(
  { kind: fc.constant("plot"), id: handle, plot: fc.constantFrom("scatter", "ternary"), drawn: list(drawn) },
  { ...title, order: fc.constant("condensation temperature"), xAxis: fc.record({ label: word }) },
);

export const arbitraryBlock = fc.oneof(data, formula, note, trend, budget, plot) as fc.Arbitrary<Block>;

/** Species of different elements, so that none is given twice. */
const ownValue = some(
  { species: fc.constantFrom("MgO", "SiO2", "Al", "FeOt", "La", "CaO"), unit: fc.constantFrom("wt%", "µg/g", "mg/g"), value: fc.integer({ min: 0, max: 100 }) },
  { sigma: fc.double({ min: 0, max: 5, noNaN: true }).map((v) => v + 0) },
);
const ownBody = some(
  {
    name: word.map((text) => `x${text}`),
    source: fc.constantFrom("10.1000/xyz", "Anon. 2030, J. Rocks 1, 2"),
    fromMemory: fc.boolean(),
    values: fc.uniqueArray(ownValue, { minLength: 1, maxLength: 4, selector: (v) => v.species }),
  },
  { description: word },
);
const ownBodies = fc.dictionary(
  fc.stringMatching(/^[A-Za-z][A-Za-z0-9_]{0,8}$/).map((code) => `OWN_${code}_1`),
  ownBody,
  { maxKeys: 3, ...plain },
);

export const arbitraryPage: fc.Arbitrary<PageDocument> = some(
  { format: fc.constant("cotectic-page/1" as const), title: word, blocks: fc.uniqueArray(arbitraryBlock, { maxLength: 6, selector: (b) => b.id }) },
  { bodies: fc.dictionary(handle, word, { maxKeys: 3, ...plain }), ownBodies },
).map((page) => JSON.parse(JSON.stringify(page)) as PageDocument);
