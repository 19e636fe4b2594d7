import type { Role, UncertaintyKind } from "../page/schema";

/**
 * What headers mean, as data. Texts are lower-cased, with spaces, points, hyphens and underscores removed, so that one entry
 * covers `Sample ID`, `sample_id` and `SAMPLE-ID`.
 */
export const roleHeaders: readonly (readonly [role: Role, headers: readonly string[]])[] = [
  [
    "sample",
    [
      ..."sample samples samplename sampleid samplenumber sampleno samplenr samplecode samplelabel samplekey sampletag sample# specimen specimenid specimenname name id label meteorite meteoritename".split(
        " ",
      ),
      ..."analysis analysisid analysisno analysisnumber analysisname igsn no nr number fieldno fieldnumber fieldid labno labid labnumber spot spotid grain probe probenname probennr probe# probenummer muster".split(
        " ",
      ),
      ..."échantillon echantillon nom muestra campione amostra 試料 试料 样品 образец sampledescription uniqueid museumno museumnumber catalogno catalognumber object".split(
        " ",
      ),
    ],
  ],
  [
    "class",
    [
      ..."class classes group groups type clan classification lithology rocktype rock rockname chondritegroup chondriteclass meteoritegroup meteoriteclass meteoritetype subgroup subclass category series suite".split(
        " ",
      ),
      ..."gruppe typ klasse groupe classe grupo tipo gruppo категория группа facies variety kind family parentbody samplegroup sampletype sampleclass".split(
        " ",
      ),
    ],
  ],
  [
    "reference",
    "reference references ref refs ref# source sources citation citations doi literature publication paper datasource bibliography quelle quellen referenz literatur référence fuente riferimento author authors".split(
      " ",
    ),
  ],
  [
    "text",
    [
      ..."comment comments note notes remark remarks description location locality country region site method methods technique instrument lab laboratory labor analyst date year latitude longitude lat lon long".split(
        " ",
      ),
      ..."mineral mineralogy texture weathering weatheringgrade shockstage petrologictype petrographictype grade status quality material find fall fallfind findfall setting tectonicsetting formation unit bemerkung remarque".split(
        " ",
      ),
    ],
  ],
];

/** Words that say a column is the uncertainty of another, and of which kind; first match wins. Spaces count as they stand. */
export const uncertaintyPatterns: readonly (readonly [pattern: RegExp, kind: UncertaintyKind, said: boolean])[] = [
  [
    /(?:95\s*%\s*(?:c\.?i\.?|c\.?l\.?|conf(?:idence)?\.?(?:\s*(?:interval|limits?|level))?|interval|unc(?:ertainty)?\.?)|\b(?:ci|cl)[\s_-]*95\s*%?|\b95[\s_-]*(?:ci|cl)\b|\b95\s*%(?!\w))/iu,
    "95 % interval",
    true,
  ],
  [
    /(?:(?<![A-Za-z0-9.])2[\s_-]*(?:rsd|rse)\b\.?[\s_]*\(?%?\)?|(?<![A-Za-z0-9.])2[\s_*×-]*(?:σ|sigma|s|sd|se)[\s_-]*(?:\(?\s*%\s*\)?|\(?\s*rel(?:ative|\.)?\s*%?\s*\)?)(?=$|[\s_)\],;])|rel(?:ative|\.)?[\s_-]*2[\s_-]*(?:σ|sigma|s|sd|se)(?=$|[\s_)\],;(]))/iu,
    "2 sigma relative %",
    true,
  ],
  [
    /(?:%\s*(?:rsd|rse)\b|(?<![A-Za-z0-9.])1?[\s_-]*(?:rsd|rse)\b\.?[\s_]*\(?%?\)?|(?<![A-Za-z0-9.])1[\s_*×-]*(?:σ|sigma|s|sd|se)[\s_-]*(?:\(?\s*%\s*\)?|\(?\s*rel(?:ative|\.)?\s*%?\s*\)?)(?=$|[\s_)\],;])|rel(?:ative|\.)?[\s_-]*(?:1[\s_-]*)?(?:σ|sigma|std|sd|se|error|err|unc(?:ertainty)?|dev(?:iation)?)\.?(?=$|[\s_)\],;(%])|\bcoefficient of variation\b|\bcv\s*%)/iu,
    "1 sigma relative %",
    true,
  ],
  [
    /(?:(?<![A-Za-z0-9.])2[\s_*×-]*(?:σ|sigma|s\.?d\.?|s\.?e\.?m?\.?|std\.?(?:\s*dev\.?)?|stdev|sterr|s)(?=$|[\s_)\],;(:]|[A-Z]\w*[a-z0-9]))|(?<![A-Za-z0-9.])2(?:sd|sem?)(?=_|\b)/iu,
    "2 sigma",
    true,
  ],
  [
    /(?:(?<![A-Za-z0-9.])1[\s_*×-]*(?:σ|sigma|s\.?d\.?|s\.?e\.?m?\.?|std\.?(?:\s*dev\.?)?|stdev|sterr|s)(?=$|[\s_)\],;(:]|[A-Z]\w*[a-z0-9]))|(?<![A-Za-z0-9.])1(?:sd|sem?)(?=_|\b)/iu,
    "1 sigma",
    true,
  ],
  [
    /(?:(?:^|[\s_(,[-])(?:st(?:andar)?d?\.?[\s_]*dev(?:iation)?\.?|stdev|std|s\.?d\.?|st(?:andar)?d\.?[\s_]*err(?:or)?\.?|s\.?e\.?m?\.?|sigma)(?=$|[\s_)\],;(]))|σ/iu,
    "1 sigma",
    true,
  ],
  [
    /(?:^|[\s_(,[-])(?:err(?:or)?s?\.?|unc(?:ert(?:ainty|\.)?)?\.?|uncertainties|precision|fehler|erreur|incertitude|±|\+\/-|\+-)(?=$|[\s_)\],;(]|[A-Z])|^(?:±|\+\/-)|^u\((?=.+\)$)/iu,
    "1 sigma",
    false,
  ],
  [/^(?:d|s_|e_|err)(?=[A-Z][A-Za-z0-9]*$)/u, "1 sigma", false],
];

/** Words beside a species that do not change what it is. */
export const plainWords: ReadonlySet<string> = new Set([
  ..."content contents conc concentration concentrations abundance abundances bulk whole rock wr wholerock measured meas value values mean average avg raw uncorrected corrected norm normalised normalized anhydrous".split(
    " ",
  ),
  ..."in as dry sample result results analysis oxide element total_of determined xrf wdxrf wd-xrf edxrf icp icpms icp-ms icpoes icp-oes icpaes icp-aes inaa naa epma emp empa sem eds laicpms la-icp-ms sims aas wet chemistry".split(
    " ",
  ),
]);

/** Quantities that are no species of their own. */
export const namedQuantities: readonly (readonly [pattern: RegExp, name: string])[] = [
  [/^(?:total|totals|sum|summe|somme|suma|sum of oxides|oxide total|total oxides|σ|∑|tot)$/iu, "Total"],
  [/^(?:loi|l\.o\.i\.?|loss on ignition|glühverlust|gv|lol|perte au feu|paf)$/iu, "LOI"],
  [/^h2o\s*(?:\+|plus|\(\+\))$/iu, "H2O_plus"],
  [/^h2o\s*(?:-|−|minus|\(-\)|\(−\))$/iu, "H2O_minus"],
  [/^mg\s*(?:#|no\.?|number|-number)$|^#mg$/iu, "Mg_number"],
];

/** Symbols that carry their own unit: δ17O in ‰, ε54Cr, µ142Nd. */
export const deviationPrefixes: readonly (readonly [pattern: RegExp, unit: "‰" | "ε" | "µ", word: string])[] = [
  [/^(?:δ|d|delta)[\s_]*(?:\^)?(\d{1,3}(?:\/\d{1,3})?)[\s_]*([A-Z][a-z]?)$/u, "‰", "delta"],
  [/^(?:Δ|D|Delta|cap\s?delta)['’′]?[\s_]*(\d{1,3})[\s_]*([A-Z][a-z]?)$/u, "‰", "Delta"],
  [/^(?:ε|epsilon|eps)[\s_]*(\d{1,3})[\s_]*([A-Z][a-z]?)$/u, "ε", "epsilon"],
  [/^(?:µ|μ|mu)[\s_]*(\d{1,3})[\s_]*([A-Z][a-z]?)$/u, "µ", "mu"],
];

/** Elements that rocks and meteorites hold by the per cent; the others are traces, given in µg/g where nothing is said. */
export const majorElements: ReadonlySet<string> = new Set("O Mg Al Si Ca Fe Na K Ti S Ni Cr Mn P C H".split(" "));
