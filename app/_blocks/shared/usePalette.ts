"use client";

import { useMemo } from "react";
import { useLight } from "@/app/_ui/useLight";

/** Colours of the light that is on, for what cannot take CSS variables: canvases and Plotly. */
export interface Palette {
  readonly light: "plane" | "polars";
  readonly paper: string;
  readonly surface: string;
  readonly ink: string;
  readonly second: string;
  readonly hairline: string;
  readonly axis: string;
  readonly vermilion: string;
  readonly magenta: string;
  readonly indigo: string;
}

type ColorName = Exclude<keyof Palette, "light">;

/** Plane light's values; what is shown before the page's own are read. */
export const planeLight: Palette = {
  light: "plane",
  paper: "#f6f5f1",
  surface: "#ffffff",
  ink: "#1d2226",
  second: "#525b61",
  hairline: "#d9d6cc",
  axis: "#a9a79e",
  vermilion: "#b24322",
  magenta: "#b0307a",
  indigo: "#3b3f9e",
};

/** The palette of the light that is on; changes when the light does. */
export function usePalette(): Palette {
  const light = useLight();
  return useMemo(() => {
    if (typeof document === "undefined") return planeLight;
    const style = getComputedStyle(document.documentElement);
    const read = (name: ColorName): string => style.getPropertyValue(`--${name}`).trim() || planeLight[name];
    return {
      light,
      paper: read("paper"),
      surface: read("surface"),
      ink: read("ink"),
      second: read("second"),
      hairline: read("hairline"),
      axis: read("axis"),
      vermilion: read("vermilion"),
      magenta: read("magenta"),
      indigo: read("indigo"),
    };
  }, [light]);
}
