import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { decodeText, guessDelimiter, quotas, readTable, splitDelimited, writeDelimited, type RawTable } from "../../../cells/table";
import { seed } from "../../support/seed";
import { errorOf } from "../language/scopes";

const utf8 = (text: string): Uint8Array => new TextEncoder().encode(text);

/** UTF-16 by hand: the platform encodes UTF-8 only. */
function utf16(text: string, little: boolean, mark: boolean): Uint8Array {
  const units = [...(mark ? [0xfeff] : []), ...Array.from({ length: text.length }, (_, i) => text.charCodeAt(i))];
  return Uint8Array.from(units.flatMap((unit) => (little ? [unit & 255, unit >> 8] : [unit >> 8, unit & 255])));
}

/** Latin-1 by hand, one byte a character. */
const latin1 = (text: string): Uint8Array => Uint8Array.from(text, (c) => c.charCodeAt(0));

const simple = "Sample,SiO2 (wt%),MgO (wt%)\nTH-01,45.0,37.8\nTH-02,44.1,39.2\n";
const rows = [
  ["TH-01", "45.0", "37.8"],
  ["TH-02", "44.1", "39.2"],
];

describe("encodings", () => {
  const accented = "Échantillon;MgO (µg/g)\nOrgueil é;1,5\n";
  it.each<[string, Uint8Array, RawTable["encoding"]]>([
    ["UTF-8", utf8(accented), "UTF-8"],
    ["UTF-8 with a mark", utf8(`\ufeff${accented}`), "UTF-8"],
    ["UTF-16 LE with a mark", utf16(accented, true, true), "UTF-16 LE"],
    ["UTF-16 BE with a mark", utf16(accented, false, true), "UTF-16 BE"],
    ["UTF-16 LE without a mark", utf16(accented, true, false), "UTF-16 LE"],
    ["UTF-16 BE without a mark", utf16(accented, false, false), "UTF-16 BE"],
    ["Latin-1", latin1(accented), "Latin-1"],
  ])("%s", (_, bytes, encoding) => {
    const table = readTable(bytes);
    expect([table.encoding, table.headers, table.rows]).toEqual([encoding, ["Échantillon", "MgO (µg/g)"], [["Orgueil é", "1,5"]]]);
  });

  it("reads ± and µ of Windows-1252 as they are meant", () => {
    const bytes = latin1("Sample,Ni (\u00b5g/g)\nA,1.2 \u00b1 0.1\n");
    expect(decodeText(bytes).text).toContain("1.2 ± 0.1");
  });

  it("takes a mark off pasted text, too", () => {
    expect(readTable(`\ufeff${simple}`).headers[0]).toBe("Sample");
  });
});

describe("delimiters and decimal signs", () => {
  it.each([",", ";", "\t", "|"])("finds %j", (delimiter) => {
    const table = readTable(utf8(simple.replaceAll(",", delimiter)));
    expect([table.delimiter, table.rows]).toEqual([delimiter, rows]);
  });

  it("finds the semicolon beside decimal commas", () => {
    const table = readTable("Probe;SiO2;MgO\nA;45,0;37,8\nB;44,1;39,2\n");
    expect([table.delimiter, table.decimal]).toEqual([";", ","]);
  });

  it("finds the tab beside decimal commas", () => {
    expect(readTable("Probe\tSiO2\tMgO\nA\t45,0\t37,8\n")).toMatchObject({ delimiter: "\t", decimal: "," });
  });

  it("does not take text with signs for a delimiter", () => {
    const text = 'Sample,Comment,MgO\nA,"grey; fine, dusty",38\nB,"pale; coarse; wet",39\n';
    expect(guessDelimiter(text)).toBe(",");
    expect(readTable(text).rows[1]).toEqual(["B", "pale; coarse; wet", "39"]);
  });

  it.each([
    ["points", "a;b\n1.5;2.5\n", "."],
    ["commas alone", "a;b\n1,5;2,5\n", ","],
    ["points and commas", "a;b\n1,5;2.5\n", "."],
    ["commas that may part thousands", "a;b\n1,500;2,500\n", "."],
    ["commas of which one cannot part thousands", "a;b\n1,500;2,50\n", ","],
    ["whole numbers", "a;b\n1;2\n", "."],
    ["limits and uncertainties with commas", "a;b\n<0,05;1,2 ± 0,1\n", ","],
  ])("settles the sign of a file with %s", (_, text, decimal) => {
    expect(readTable(text).decimal).toBe(decimal);
  });

  it.each([
    ["Unix", "\n"],
    ["Windows", "\r\n"],
    ["old Macintosh", "\r"],
  ])("line ends of %s", (_, end) => {
    expect(readTable(simple.replaceAll("\n", end)).rows).toEqual(rows);
  });

  it("needs no line end after the last row", () => {
    expect(readTable(simple.trimEnd()).rows).toEqual(rows);
  });
});

describe("cells in quotes", () => {
  it("hold delimiters, doubled quotes and line breaks", () => {
    const table = readTable('Sample,Comment,MgO\n"A,1","says ""fresh""",38\nB,"two\nlines",39\n');
    expect(table.rows).toEqual([
      ["A,1", 'says "fresh"', "38"],
      ["B", "two\nlines", "39"],
    ]);
  });

  it("never closed are refused, with the line", () => {
    const error = errorOf(() => readTable('Sample,Comment,MgO\nA,ok,38\nB,"open,39\nC,ok,40\n'));
    expect(error.code).toBe("table-quote");
    expect(error.text).toContain("line 3");
  });

  it("a quote inside a cell stands for itself", () => {
    expect(readTable('Sample,Size,MgO\nA,2" core,38\n').rows[0]).toEqual(["A", '2" core', "38"]);
  });
});

describe("what is no table is refused in words", () => {
  it.each<[string, Uint8Array | string, string, RegExp]>([
    ["an empty file", new Uint8Array(0), "source-empty", /no bytes at all/u],
    ["blanks alone", utf8(" \n\n\t\n"), "source-empty", /nothing but blanks/u],
    ["headers without rows", "Sample,SiO2,MgO\n", "table-no-rows", /headers \(Sample, SiO2, MgO\) and no rows/u],
    ["headers and units without rows", "Sample,SiO2,MgO\n,wt%,wt%\n", "table-no-rows", /no rows/u],
    ["text with a zero byte", utf8("Sample,MgO\nA\u0000,38\n"), "source-not-text", /zero bytes/u],
    ["a PDF", utf8("%PDF-1.7\n"), "source-not-text", /PDF/u],
    ["a PNG image", Uint8Array.of(0x89, 0x50, 0x4e, 0x47, 13, 10, 26, 10), "source-not-text", /PNG/u],
    ["an old spreadsheet", Uint8Array.of(0xd0, 0xcf, 0x11, 0xe0, 0xa1), "source-not-text", /\.xls/u],
    ["a zip", Uint8Array.of(0x50, 0x4b, 3, 4, 20), "source-not-text", /zip/u],
    ["control characters", Uint8Array.from({ length: 500 }, (_, i) => 1 + (i % 8)), "source-not-text", /control characters/u],
    ["half a UTF-16 character", Uint8Array.of(0xff, 0xfe, 65, 0, 66), "source-not-text", /not whole/u],
  ])("%s", (_, source, code, text) => {
    const error = errorOf(() => readTable(source));
    expect(error.code).toBe(code);
    expect(error.text).toMatch(text);
  });

  it("bytes of programs end in a sentence or a table, never in another error", () => {
    fc.assert(
      fc.property(fc.uint8Array({ minLength: 1, maxLength: 400 }), (bytes) => {
        try {
          const table = readTable(bytes);
          expect(table.rows.every((row) => row.length === table.headers.length)).toBe(true);
        } catch (error) {
          expect((error as Error).name).toBe("CellError");
        }
      }),
      { seed, numRuns: 500 },
    );
  });

  it("200 MB, by the limit's name, before anything is read", () => {
    // The length alone is looked at, so that nothing need be held.
    const bytes = { length: 200_000_000 } as Uint8Array;
    expect(errorOf(() => readTable(bytes))).toMatchObject({
      code: "source-too-big",
      text: expect.stringMatching(/191 MiB, and a source may have 50/u) as string,
    });
    const text = "1,2\n".repeat(50_000_000);
    expect(errorOf(() => readTable(text))).toMatchObject({ code: "source-too-big", text: expect.stringContaining("50 MiB") as string });
  });

  it("more rows or columns than a source may have, with both numbers", () => {
    const many = errorOf(() => readTable(`a,b\n${"1,2\n".repeat(quotas.rows + 2)}`));
    expect(many.code).toBe("source-too-big");
    expect(many.text).toContain("a source may have 200000");
    const wide = errorOf(() => readTable(`${Array.from({ length: 301 }, (_, i) => `c${i}`).join(",")}\n${"1,".repeat(300)}1\n`));
    expect(wide.text).toContain("301 columns, and a source may have 300");
  });
});

describe("shape", () => {
  it("of ragged rows is named row by row and nothing is lost silently", () => {
    const table = readTable("Sample,SiO2,MgO\nA,45\nB,44,39,extra\nC,43,40\n");
    expect(table.rows).toEqual([
      ["A", "45", ""],
      ["B", "44", "39"],
      ["C", "43", "40"],
    ]);
    expect(table.problems.map(({ code, row, severity }) => [code, row, severity])).toEqual([
      ["row-ragged", 1, "warning"],
      ["row-ragged", 2, "warning"],
    ]);
    expect(table.problems[0]?.text).toContain("Row 1 has 2 cells and there are 3 headers");
    expect(table.problems[1]?.text).toContain("extra");
  });

  it("of many ragged rows is counted after twenty", () => {
    const table = readTable(`Sample,SiO2,MgO\nfull,45,38\n${"A,45\n".repeat(50)}`);
    expect(table.problems).toHaveLength(21);
    expect(table.problems[20]?.text).toContain("30 more rows");
  });

  it("of two columns with one name is told, and both are kept", () => {
    const table = readTable("Sample,Mg,Mg\nA,1,2\n");
    expect(table.headers).toEqual(["Sample", "Mg", "Mg"]);
    expect(table.problems).toEqual([
      expect.objectContaining({ code: "header-twice", column: "Mg", text: expect.stringContaining("Columns 2 and 3") as string }),
    ]);
  });

  it("of a column without a header gives it one", () => {
    const table = readTable("Sample,,MgO\nA,1,2\n");
    expect(table.headers).toEqual(["Sample", "column 2", "MgO"]);
    expect(table.problems[0]).toMatchObject({ code: "header-missing", column: "column 2" });
  });

  it("of columns that are empty to the end leaves them out", () => {
    expect(readTable("Sample,MgO,,\nA,38,,\nB,39,,\n").headers).toEqual(["Sample", "MgO"]);
  });

  it("knows a title above the headers, a line of units below them, and blank lines", () => {
    const table = readTable("Table 1. Bulk compositions\n\nSample,SiO2,MgO\n,(wt%),(wt%)\n\nA,45,38\n,,\nB,44,39\n");
    expect([table.preamble, table.headers, table.units, table.rows.length]).toEqual([
      ["Table 1. Bulk compositions"],
      ["Sample", "SiO2", "MgO"],
      ["", "wt%", "wt%"],
      2,
    ]);
  });

  it("does not take a first sample called K for a line of units", () => {
    const table = readTable("Sample,SiO2,MgO\nK,,\nB,44,39\n");
    expect([table.units, table.rows.length]).toEqual([undefined, 2]);
  });

  it("of data without headers is doubted", () => {
    expect(readTable("1,45,38\n2,44,39\n").problems[0]).toMatchObject({ code: "header-numbers" });
  });

  it("of one column is a table", () => {
    expect(readTable("MgO\n38\n39\n").rows).toEqual([["38"], ["39"]]);
  });

  it("of a very long header is kept to 200 characters", () => {
    expect(readTable(`Sample,${"x".repeat(5000)}\nA,1\n`).headers[1]).toHaveLength(200);
  });
});

describe("text → table → text", () => {
  const delimiter = fc.constantFrom(",", ";", "\t", "|");
  const cell = fc.oneof(
    fc.string({ unit: "grapheme", maxLength: 12 }),
    fc.constantFrom('"', '""', "\n", "\r\n", "a\r", " x", "x ", ",", ";", "\t", "|", "45.0", "<0,05", "1.2 ± 0.1", "n.d.", ""),
    fc.stringMatching(/^[",;|\t\n a1]{0,8}$/u),
  );

  it("loses nothing of any cell", () => {
    fc.assert(
      fc.property(delimiter, fc.array(fc.array(cell, { minLength: 2, maxLength: 5 }), { minLength: 1, maxLength: 6 }), (sign, cells) => {
        const [headers = [], ...rows] = cells;
        const text = writeDelimited(headers, rows, sign);
        const read = splitDelimited(text, sign);
        expect(read).toEqual(cells);
        expect(writeDelimited(read[0] ?? [], read.slice(1), sign)).toBe(text);
      }),
      { seed, numRuns: 1000 },
    );
  });

  it("loses nothing of a source, whatever its encoding", () => {
    const plain = fc.stringMatching(/^(?:[A-Za-zµ±é0-9.<" -]{4,10})?$/u);
    const line = fc.tuple(fc.stringMatching(/^[A-Z]{1,6}\d?$/u), plain, plain).map((cells): readonly string[] => cells);
    const encode = fc.constantFrom(
      utf8,
      (text: string) => utf8(`\ufeff${text}`),
      (text: string) => utf16(text, true, true),
      (text: string) => utf16(text, false, true),
    );
    fc.assert(
      fc.property(delimiter, encode, fc.array(line, { minLength: 1, maxLength: 8 }), (sign, encoded, lines) => {
        const text = writeDelimited(["Sample", "MgO (wt%)", "Comment"], lines, sign);
        const table = readTable(encoded(text));
        expect(table.headers).toEqual(["Sample", "MgO (wt%)", "Comment"]);
        expect(table.rows).toEqual(lines);
        expect(writeDelimited(table.headers, table.rows, table.delimiter)).toBe(text);
      }),
      { seed, numRuns: 400 },
    );
  });
});
