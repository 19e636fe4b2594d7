import type { PlotLayer, PlotResult } from "../page/results";
import type { Drawing } from "./drawing";
import { State, stateName, stateNames, type StateName } from "../quantity/state";

/** Of no line's samples: outside every condition. */
const NOT_ASKED = 255;

/**
 * How many samples stand on the drawing and, by state, do not. A sample that several lines draw counts once; one that no line
 * asks for, because it is outside their conditions, does not count. Samples set aside are counted always.
 */
export function countDrawn({ block: { plot }, chosen }: Drawing, layers: readonly PlotLayer[]): Pick<PlotResult, "drawn" | "notDrawn"> {
  const best = new Map<string, Uint8Array>();
  for (const layer of layers) {
    if (layer.what !== "samples") continue;
    const { x, y, state } = layer.points;
    const known = best.get(layer.data) ?? new Uint8Array(state.length).fill(NOT_ASKED);
    best.set(layer.data, known);
    const holds = chosen.get(layer.drawn);
    for (let row = 0; row < state.length; row++) {
      const code = state[row] ?? State.missing;
      const hasPlace = Number.isFinite(x[row]) && (plot === "distribution" || Number.isFinite(y[row]));
      const isAsked = holds === undefined || holds[row] === 1 || code === State.setAside;
      if (!isAsked || (code === State.present && !hasPlace)) continue;
      known[row] = Math.min(known[row] ?? NOT_ASKED, code);
    }
  }
  const counts = new Array<number>(stateNames.length).fill(0);
  for (const known of best.values()) for (const code of known) if (code !== NOT_ASKED) counts[code] = (counts[code] ?? 0) + 1;
  const notDrawn: Partial<Record<StateName, number>> = {};
  for (let code = 1; code < counts.length; code++) if ((counts[code] ?? 0) > 0) notDrawn[stateName(code)] = counts[code] ?? 0;
  return { drawn: counts[State.present] ?? 0, notDrawn };
}
