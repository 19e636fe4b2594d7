/** The size a figure is asked for on paper. `dpi` counts for PNG alone. */
export interface ExportSize {
  readonly widthMm: number;
  readonly heightMm: number;
  readonly dpi: number;
}

export const MM_PER_INCH = 25.4;
/** A CSS pixel is a 96th of an inch: type of 11 pixels is 8.25 points on paper. */
export const PIXELS_PER_MM = 96 / MM_PER_INCH;

const bounds = { least: 40, most: 500, leastDpi: 72, mostDpi: 1200, mostPixels: 40_000_000 } as const;

/** Pixels of a length at a density: mm ÷ 25.4 × dpi, to the nearest. */
export function pixelsOf(mm: number, dpi: number): number {
  return Math.round((mm / MM_PER_INCH) * dpi);
}

/** What is wrong with a size, in a sentence; null where nothing is. */
export function sizeProblem({ widthMm, heightMm, dpi }: ExportSize, format: "svg" | "png"): string | null {
  for (const [mm, what] of [
    [widthMm, "width"],
    [heightMm, "height"],
  ] as const)
    if (!(mm >= bounds.least && mm <= bounds.most)) return `Give a ${what} between ${bounds.least} and ${bounds.most} mm.`;
  if (format === "svg") return null;
  if (!(dpi >= bounds.leastDpi && dpi <= bounds.mostDpi)) return `Give between ${bounds.leastDpi} and ${bounds.mostDpi} dots per inch.`;
  if (pixelsOf(widthMm, dpi) * pixelsOf(heightMm, dpi) > bounds.mostPixels)
    return "So large a picture would have more than 40 million pixels. Give less of size or density.";
  return null;
}
