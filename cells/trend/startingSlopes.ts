import type { FitPoints } from "./lineFit";
import { moments } from "./moments";

/**
 * Slopes from which an iteration is started, the likeliest first: y on x, reduced major axis, x on y, then a fan of slopes
 * in both directions, scaled to the spread of the data.
 */
export function startingSlopes(points: FitPoints): readonly number[] {
  const { xx, xy, yy } = moments(points);
  const scale = Math.sqrt(yy / xx);
  const sign = xy < 0 ? -1 : 1;
  const fan = [0.1, 0.4, 1, 2.5, 10].flatMap((factor) => [sign * factor * scale, -sign * factor * scale]);
  return [xy / xx, sign * scale, yy / xy, ...fan].filter((slope) => Number.isFinite(slope));
}
