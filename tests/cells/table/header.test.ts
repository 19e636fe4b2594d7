import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { readHeader } from "../../../cells/table";
import { seed } from "../../support/seed";
import { knownHeaders } from "./headers";

describe("headers as laboratories write them", () => {
  it("are more than a hundred, each once", () => {
    expect(knownHeaders.length).toBeGreaterThan(300);
    expect(new Set(knownHeaders.map(({ header }) => header)).size).toBe(knownHeaders.length);
  });

  it.each(knownHeaders.map((known) => [known.header, known] as const))("%j", (header, known) => {
    const read = readHeader(header);
    expect({ role: read.role, species: read.species, name: read.name, unit: read.unit?.symbol, basis: read.basis, kind: read.kind }).toEqual({
      role: known.role,
      species: known.species,
      name: known.name,
      unit: known.unit,
      basis: known.basis,
      kind: known.kind,
    });
  });

  it.each(["SiO2 (wt%, ±2σ)", "SiO2 (wt%) ± 2σ"])("%s heads values that carry their uncertainty", (header) => {
    const read = readHeader(header);
    expect([read.role, read.species, read.unit?.symbol, read.kind]).toEqual(["quantity", "SiO2", "wt%", "2 sigma"]);
  });

  it("say where the kind of an uncertainty is not said", () => {
    expect(readHeader("MgO error")).toMatchObject({ kind: "1 sigma", kindSaid: false });
    expect(readHeader("MgO 1σ").kindSaid).toBe(true);
    expect(readHeader("MgO error").reason).toContain("please check");
  });

  it("that look like two things are one: troilite iron, pressure, potassium, gallium", () => {
    expect(readHeader("P (GPa)").species).toBeUndefined();
    expect(readHeader("P (ppm)").species).toBe("P");
    expect(readHeader("K (wt%)").species).toBe("K");
    expect(readHeader("T (K)").species).toBeUndefined();
    expect(readHeader("Ga (ppm)").species).toBe("Ga");
    expect(readHeader("Ga").species).toBe("Ga");
    expect(readHeader("Age (Ga)").species).toBeUndefined();
  });

  it("gives every header a reason in words", () => {
    for (const { header } of knownHeaders) expect(readHeader(header).reason.length).toBeGreaterThan(2);
  });

  it("end in something said, whatever is written, and soon", () => {
    const piece = fc.constantFrom(
      "2s",
      "2 σ",
      "rel. ",
      "(",
      "[",
      "±",
      "95 %",
      "Mg",
      "SiO2",
      "wt%",
      "_",
      " ",
      "/",
      "-",
      "δ",
      "Δ",
      "{",
      "in ",
      "µg",
      "%",
      "FeO*",
      "__proto__",
      "é",
    );
    fc.assert(
      fc.property(
        fc.oneof(
          fc.string({ unit: "grapheme", maxLength: 200 }),
          fc.array(piece, { maxLength: 60 }).map((pieces) => pieces.join("")),
        ),
        (header) => {
          const start = performance.now();
          const read = readHeader(header);
          expect(performance.now() - start).toBeLessThan(1000);
          if (read.role === "uncertainty") expect(read.kind).toBeDefined();
          if (read.role === "quantity") expect(read.species ?? read.name).toBeDefined();
        },
      ),
      { seed, numRuns: 600 },
    );
  });
});
