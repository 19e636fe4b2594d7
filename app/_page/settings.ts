import type { Settings } from "./contract";

const UNCERTAINTY_KEY = "cotectic-uncertainty";

/** How this person wants uncertainties written, kept in the browser. */
export function storedUncertainty(): Settings["uncertainty"] {
  try {
    return localStorage.getItem(UNCERTAINTY_KEY) === "plus-minus" ? "plus-minus" : "concise";
  } catch {
    return "concise";
  }
}

export function storeUncertainty(form: Settings["uncertainty"]): void {
  try {
    localStorage.setItem(UNCERTAINTY_KEY, form);
  } catch {
    // Storage may be refused; the choice then lasts as long as the page.
  }
}
