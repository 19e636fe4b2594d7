"use client";

import dynamic from "next/dynamic";
import { useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import type { PlotBlock, PlotResult } from "@/cells";

const ExportDialog = dynamic(() => import("./ExportDialog").then((module) => module.ExportDialog), { ssr: false });

/** Opens the sheet that saves a figure. */
export function ExportButton({ block, result, view }: { readonly block: PlotBlock; readonly result: PlotResult; readonly view: PageView }) {
  const [open, setOpen] = useState(false);
  return (
    <>
      <Button onClick={() => setOpen(true)}>Save the figure</Button>
      {open && <ExportDialog block={block} result={result} view={view} onClose={() => setOpen(false)} />}
    </>
  );
}
