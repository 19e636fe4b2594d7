"use client";

import { useSyncExternalStore } from "react";

export type LightSetting = "plane" | "polars" | "system";
export type Light = "plane" | "polars";

/** Where the setting is kept, read again by the script in app/layout.tsx before the first paint. */
export const LIGHT_KEY = "cotectic-light";

const listeners = new Set<() => void>();

function apply(setting: LightSetting): void {
  const dark = setting === "polars" || (setting === "system" && matchMedia("(prefers-color-scheme: dark)").matches);
  document.documentElement.classList.toggle("polars", dark);
}

/** The person's setting; "system" where none was made or nothing can be stored. */
export function lightSetting(): LightSetting {
  try {
    const stored = localStorage.getItem(LIGHT_KEY);
    return stored === "plane" || stored === "polars" ? stored : "system";
  } catch {
    return "system";
  }
}

/** Keeps and applies a setting; everything drawn with {@link useLight} is drawn anew. */
export function setLight(setting: LightSetting): void {
  try {
    localStorage.setItem(LIGHT_KEY, setting);
  } catch {
    // Storage may be refused; the choice then lasts as long as the page.
  }
  apply(setting);
  for (const listener of listeners) listener();
}

function subscribe(listener: () => void): () => void {
  const system = matchMedia("(prefers-color-scheme: dark)");
  const follow = () => {
    apply(lightSetting());
    listener();
  };
  listeners.add(listener);
  system.addEventListener("change", follow);
  return () => {
    listeners.delete(listener);
    system.removeEventListener("change", follow);
  };
}

/** The light that is on, for what is drawn on canvases and by Plotly; CSS follows by itself. */
export function useLight(): Light {
  return useSyncExternalStore(
    subscribe,
    () => (document.documentElement.classList.contains("polars") ? "polars" : "plane"),
    () => "plane",
  );
}

/** The setting itself, for the switch. */
export function useLightSetting(): LightSetting {
  return useSyncExternalStore(subscribe, lightSetting, () => "system");
}
