"use client";

import Image from "next/image";
import { useEffect, useMemo, useRef, useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { readNumber } from "@/app/_blocks/shared/readNumber";
import { Button } from "@/app/_ui/Button";
import { Dialog } from "@/app/_ui/Dialog";
import { Select } from "@/app/_ui/Select";
import { TextField } from "@/app/_ui/TextField";
import type { PlotBlock, PlotResult } from "@/cells";
import { captionOf } from "./caption";
import { pixelsOf, sizeProblem, type ExportSize } from "./exportSize";

export interface ExportDialogProps {
  readonly block: PlotBlock;
  readonly result: PlotResult;
  readonly view: PageView;
  onClose(): void;
}

type Format = "svg" | "png";
const formats = [
  { value: "svg", label: "SVG, sharp at any size" },
  { value: "png", label: "PNG, in pixels" },
] as const;

/** Height over width of a figure by kind; a triangle needs room for its words above and below. */
const shape: Readonly<Record<PlotResult["plot"], number>> = { scatter: 0.78, distribution: 0.6, pattern: 0.72, ternary: 0.95 };
const FIRST_WIDTH = 120;

/** Saves a figure at a size on paper, with the caption that says what it shows. */
export function ExportDialog({ block, result, view, onClose }: ExportDialogProps) {
  const [format, setFormat] = useState<Format>("svg");
  const [fields, setFields] = useState({ width: String(FIRST_WIDTH), height: String(Math.round(FIRST_WIDTH * shape[result.plot])), dpi: "300" });
  const [fault, setFault] = useState<string | null>(null);
  const [done, setDone] = useState("");
  const [preview, setPreview] = useState<string | null>(null);
  const results = view.results;
  const size = useMemo((): ExportSize => {
    const number = (text: string): number => {
      const read = readNumber(text);
      return "value" in read ? read.value : NaN;
    };
    return { widthMm: number(fields.width), heightMm: number(fields.height), dpi: number(fields.dpi) };
  }, [fields]);
  const problem = sizeProblem(size, format);
  const figure = useMemo(() => {
    if (results === null) return null;
    const nameOf = (handle: string): string => view.blocks.find((b) => b.block.id === handle)?.block.name ?? handle;
    const caption = captionOf({ block, result, results, ownBodies: view.ownBodies, nameOf });
    return { block, result, results, nameOf, classIndex: (name: string) => view.classIndex(name), title: block.name ?? block.id, caption };
  }, [block, result, results, view]);

  const shown = useRef<string | null>(null);
  useEffect(() => {
    if (figure === null || problem !== null) return;
    let isWanted = true;
    const timer = setTimeout(() => {
      void import("./drawFigure")
        .then(({ figureSvg }) => figureSvg(figure, size))
        .then(
          (svg) => {
            if (!isWanted) return;
            if (shown.current !== null) URL.revokeObjectURL(shown.current);
            shown.current = URL.createObjectURL(new Blob([svg], { type: "image/svg+xml" }));
            setPreview(shown.current);
            setFault(null);
          },
          (error: unknown) => isWanted && setFault(inWords(error)),
        );
    }, 300);
    return () => {
      isWanted = false;
      clearTimeout(timer);
    };
  }, [figure, size, problem]);
  useEffect(
    () => () => {
      if (shown.current !== null) URL.revokeObjectURL(shown.current);
    },
    [],
  );

  const save = async (): Promise<void> => {
    if (figure === null || problem !== null) return;
    setFault(null);
    try {
      const { figureSvg, figurePng } = await import("./drawFigure");
      const svg = await figureSvg(figure, size);
      const blob = format === "svg" ? new Blob([svg], { type: "image/svg+xml" }) : await figurePng(svg, size, figure.title, figure.caption);
      handOver(blob, `${fileStem(figure.title)}.${format}`);
      setDone(`Saved as ${fileStem(figure.title)}.${format}.`);
    } catch (error) {
      setFault(inWords(error));
    }
  };
  const field = (name: keyof typeof fields, label: string) => (
    <TextField
      label={label}
      mono
      inputMode="decimal"
      value={fields[name]}
      onText={(text) => {
        setDone("");
        setFields((before) => ({ ...before, [name]: text }));
      }}
    />
  );
  const pixels = problem === null ? `${pixelsOf(size.widthMm, size.dpi)} × ${pixelsOf(size.heightMm, size.dpi)} pixels` : "";
  return (
    <Dialog
      open
      size="wide"
      onClose={onClose}
      title="Save the figure"
      says="The whole figure, on white, at the size it will have in print. Picks and close-ups are left off."
      actions={
        <>
          <span role="status" className="mr-auto text-second">
            {done}
          </span>
          <Button look="main" disabled={problem !== null || figure === null} onClick={() => void save()}>
            {format === "svg" ? "Save as SVG" : "Save as PNG"}
          </Button>
        </>
      }
    >
      <div className="grid gap-6 sm:grid-cols-[minmax(0,1fr)_232px]">
        <div className="min-w-0">
          <div className="flex min-h-40 items-center justify-center border border-hairline bg-[#fff] p-2">
            {preview === null ? (
              <p className="text-[#525b61]">Drawing the figure.</p>
            ) : (
              <Image
                unoptimized
                src={preview}
                alt="The figure as it will be saved"
                width={Math.round(4 * size.widthMm)}
                height={Math.round(4 * size.heightMm)}
                className="max-h-[46vh] w-auto max-w-full object-contain"
              />
            )}
          </div>
        </div>
        <div className="grid content-start gap-3">
          <Select
            label="Format"
            value={format}
            options={formats}
            onChoose={(next) => {
              setDone("");
              setFormat(next);
            }}
          />
          {field("width", "Width, mm")}
          {field("height", "Height, mm")}
          {format === "png" && field("dpi", "Dots per inch")}
          {problem === null ? (
            <p className="text-margin text-second">
              {format === "png" ? pixels : "Type is 8 to 9 points, IBM Plex Sans, inside the file; where a program ignores it: Helvetica Neue, then Arial."}
            </p>
          ) : (
            <p role="alert" className="text-margin text-vermilion">
              {problem}
            </p>
          )}
        </div>
      </div>
      {figure !== null && (
        <section className="mt-4 border-t border-hairline pt-3" aria-label="Caption">
          <div className="flex flex-wrap items-baseline gap-4">
            <h3 className="mr-auto font-medium">Caption</h3>
            <Button
              onClick={() => {
                navigator.clipboard.writeText(figure.caption).then(
                  () => setDone("The caption is copied."),
                  () => setFault("The browser did not let the caption be copied. Mark the text and copy it by hand."),
                );
              }}
            >
              Copy the caption
            </Button>
            <Button onClick={() => handOver(new Blob([figure.caption], { type: "text/plain;charset=utf-8" }), `${fileStem(figure.title)}.txt`)}>
              Save the caption
            </Button>
          </div>
          <p className="mt-2 font-serif text-[15px] leading-6 select-text">{figure.caption}</p>
          <p className="mt-1 text-margin text-second">It is inside the file too: as description of the SVG and of the PNG.</p>
        </section>
      )}
      {fault !== null && (
        <p role="alert" className="mt-3 text-vermilion">
          {fault}
        </p>
      )}
    </Dialog>
  );
}

function inWords(error: unknown): string {
  return error instanceof Error ? error.message : "The figure could not be drawn. Try again.";
}

/** A file name that any system takes. */
function fileStem(title: string): string {
  const stem = title
    .normalize("NFKD")
    .replace(/[^\p{L}\p{N}]+/gu, "-")
    .replace(/^-+|-+$/gu, "")
    .toLowerCase();
  return stem === "" ? "figure" : stem.slice(0, 60);
}

function handOver(blob: Blob, name: string): void {
  const url = URL.createObjectURL(blob);
  const link = document.createElement("a");
  link.href = url;
  link.download = name;
  link.click();
  setTimeout(() => URL.revokeObjectURL(url), 10_000);
}
