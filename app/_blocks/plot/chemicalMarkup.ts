/** Characters that Plotly's small markup would read as its own. */
export function plainText(text: string): string {
  return text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;");
}

const oxide = /\b(?:[A-Z][a-z]?\d*)O\d*t?\b/gu;

/** A text for Plotly with the figures of oxides below the line: SiO2 and Fe2O3t, but not S1 or a number alone. */
export function chemicalMarkup(text: string): string {
  return plainText(text).replace(oxide, (word) => word.replace(/\d+/gu, "<sub>$&</sub>"));
}
