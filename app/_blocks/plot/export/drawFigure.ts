"use client";

// First: Plotly looks for these when it is loaded.
import "../plotlyStyles";
import plotly from "plotly.js-dist-min";
import { planeLight, type Palette } from "@/app/_blocks/shared/usePalette";
import type { PageResults, PlotBlock, PlotResult } from "@/cells";
import { paintCloud } from "../cloud/paintCloud";
import type { CloudView } from "../cloud/cloud";
import { buildFigure, type Figure } from "../figure";
import { layOutPlot } from "../layOutPlot";
import { embeddedFonts } from "./embeddedFonts";
import { PIXELS_PER_MM, pixelsOf, type ExportSize } from "./exportSize";
import { finishSvg } from "./finishSvg";
import { withDensity } from "./pngDensity";
import { printKey } from "./printKey";

export interface FigureToDraw {
  readonly block: PlotBlock;
  readonly result: PlotResult;
  readonly results: PageResults;
  readonly title: string;
  readonly caption: string;
  nameOf(handle: string): string;
  classIndex(name: string): number;
}

/** Paper is white in print, whatever light the page is seen in. */
const paper: Palette = { ...planeLight, paper: "#ffffff", surface: "#ffffff" };
/** Density of the points of very large tables, which lie under the lines as a picture. */
const CLOUD_DPI = 600;
/** Less than this, in pixels, is no drawing. */
const LEAST_HEIGHT = 110;

/** The figure as an SVG that stands alone: exactly as large as asked, on white, with its caption and its type inside. */
export async function figureSvg(figure: FigureToDraw, size: ExportSize): Promise<string> {
  const width = Number((size.widthMm * PIXELS_PER_MM).toFixed(4));
  const height = Number((size.heightMm * PIXELS_PER_MM).toFixed(4));
  const classIndex = (name: string): number => figure.classIndex(name);
  const key = printKey(figure.result, width, paper, classIndex);
  const drawn = height - (key?.height ?? 0);
  if (drawn < LEAST_HEIGHT) throw new Error("At this size the key of classes leaves no room for the drawing. Make the figure higher or wider.");
  const laid = layOutPlot(figure.block, figure.result, { width, height: drawn }, null, classIndex);
  const nothing = (): [] => [];
  const drawing = {
    palette: paper,
    frame: laid.frame,
    projector: false,
    classIndex,
    pickedIn: nothing,
    pickedByOthers: nothing,
  };
  const made = buildFigure(figure.block, laid.result, (handle) => figure.nameOf(handle), drawing, figure.results, "pan", laid.rows);
  const svg = await plotly.toImage(
    {
      data: made.data,
      layout: {
        ...made.layout,
        paper_bgcolor: "#ffffff",
        plot_bgcolor: "rgba(0,0,0,0)",
        images: await underlay(made),
      },
      config: { staticPlot: true },
    },
    { format: "svg", width, height: drawn, imageDataOnly: true },
  );
  const over = key?.svg(drawn) ?? "";
  return finishSvg(svg, { size, width, height, title: figure.title, caption: figure.caption, fonts: await embeddedFonts(svg + over), over });
}

/** Points too many for marks of their own, as a picture under the axes. */
async function underlay({ cloud }: Figure): Promise<object[]> {
  if (cloud === null) return [];
  const { frame } = cloud;
  const inner = { w: frame.width - frame.margin.l - frame.margin.r, h: frame.height - frame.margin.t - frame.margin.b };
  const source = await pictureOf(cloud);
  return [
    {
      source,
      xref: "paper",
      yref: "paper",
      x: -frame.margin.l / inner.w,
      y: 1 + frame.margin.t / inner.h,
      sizex: Math.ceil(frame.width) / inner.w,
      sizey: Math.ceil(frame.height) / inner.h,
      sizing: "stretch",
      layer: "below",
    },
  ];
}

async function pictureOf(cloud: CloudView): Promise<string> {
  const { frame } = cloud;
  // A painting has whole pixels: the last, begun one is filled up, and what lies in it stays where it is.
  const [width, height] = [Math.ceil(frame.width), Math.ceil(frame.height)];
  const margin = { ...frame.margin, r: frame.margin.r + width - frame.width, b: frame.margin.b + height - frame.height };
  const painting = paintCloud({ ...cloud, frame: { ...frame, width, height, margin } }, CLOUD_DPI / 96);
  const canvas = document.createElement("canvas");
  canvas.width = painting.width;
  canvas.height = painting.height;
  canvas.getContext("2d")?.putImageData(new ImageData(painting.pixels, painting.width, painting.height), 0, 0);
  return canvas.toDataURL("image/png");
}

/** The same figure as a PNG: mm ÷ 25.4 × dpi pixels, its density and its caption inside. */
export async function figurePng(svg: string, size: ExportSize, title: string, caption: string): Promise<Blob> {
  const url = URL.createObjectURL(new Blob([svg], { type: "image/svg+xml" }));
  try {
    const image = new Image();
    image.src = url;
    await image.decode();
    const canvas = document.createElement("canvas");
    canvas.width = pixelsOf(size.widthMm, size.dpi);
    canvas.height = pixelsOf(size.heightMm, size.dpi);
    const context = canvas.getContext("2d");
    if (context === null) throw new Error("This browser gives no surface to draw a picture on. Save the figure as SVG.");
    context.fillStyle = "#ffffff";
    context.fillRect(0, 0, canvas.width, canvas.height);
    context.drawImage(image, 0, 0, canvas.width, canvas.height);
    const blob = await new Promise<Blob | null>((resolve) => canvas.toBlob(resolve, "image/png"));
    if (blob === null) throw new Error("This browser could not make so large a picture. Give less of size or density, or save the figure as SVG.");
    const bytes = withDensity(new Uint8Array(await blob.arrayBuffer()), size.dpi, { Title: title, Description: caption, Software: "Cotectic" });
    return new Blob([bytes], { type: "image/png" });
  } finally {
    URL.revokeObjectURL(url);
  }
}
