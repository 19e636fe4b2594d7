import type { ExportSize } from "./exportSize";

/** A text as it stands in XML. */
export function escapedForXml(text: string): string {
  return text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;");
}

export interface SvgParts {
  readonly size: ExportSize;
  /** Size of the drawing in its own pixels. */
  readonly width: number;
  readonly height: number;
  readonly title: string;
  readonly caption: string;
  /** Rules of @font-face, with the type inside. */
  readonly fonts: string;
  /** More to draw over it, as SVG. */
  readonly over?: string;
}

/** A drawing of Plotly's as a figure that stands alone: its size in millimetres, its title and caption, and its type inside. */
export function finishSvg(svg: string, { size, width, height, title, caption, fonts, over = "" }: SvgParts): string {
  const inner = svg.replace(/^[\s\S]*?<svg[^>]*>/u, "");
  if (inner === svg) throw new Error("expected an SVG from the drawing surface");
  const root =
    `<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink" ` +
    `width="${size.widthMm}mm" height="${size.heightMm}mm" viewBox="0 0 ${width} ${height}" role="img" aria-labelledby="figure-title figure-caption">`;
  const words = `<title id="figure-title">${escapedForXml(title)}</title><desc id="figure-caption">${escapedForXml(caption)}</desc>`;
  const style = fonts === "" ? "" : `<style>${fonts}</style>`;
  // The whole figure has its ground, also what lies beside the drawing itself.
  const ground = `<rect width="${width}" height="${height}" fill="#ffffff"/>`;
  return `<?xml version="1.0" encoding="UTF-8"?>\n${root}${words}${style}${ground}${inner.replace(/<\/svg>\s*$/u, "")}${over}</svg>`;
}
