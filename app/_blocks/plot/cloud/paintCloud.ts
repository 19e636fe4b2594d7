import type { CloudView } from "./cloud";
import { nowhere } from "./cloud";
import { stampOf, type Stamp } from "./stamp";

/** A painting of clouds, and which sample lies where. */
export interface Painting {
  /** Red, green, blue, opacity of every pixel, from the upper left, row by row; opaque. */
  readonly pixels: Uint8ClampedArray<ArrayBuffer>;
  /** In pixels of the painting: those of the page times `ratio`. */
  readonly width: number;
  readonly height: number;
  readonly ratio: number;
  /** For each pixel of the page the sample whose middle lies on it: its place among all samples of all clouds, plus 1; 0 for none. */
  readonly middles: Uint32Array;
  /** Width of the page's pixels in `middles`. */
  readonly across: number;
}

/** More markers than this on one place are one spot: those above hide those below to within one part in 50. */
const mostOnOnePlace = 5;

function channels(color: string): readonly [number, number, number] {
  const value = Number.parseInt(color.slice(1), 16);
  return [(value >> 16) & 255, (value >> 8) & 255, value & 255];
}

/** Data to pixels as `scale × value + shift`, on a log axis of the value's decimal logarithm. */
function line(from: number, to: number, start: number, end: number): readonly [number, number] {
  const scale = to === from ? 0 : (end - start) / (to - from);
  return [scale, to === from ? (start + end) / 2 : start - scale * from];
}

/**
 * Paints clouds on their ground. Markers whose middle lies outside of the axes are left out, and none reaches over them.
 *
 * @param ratio pixels of the painting in one pixel of the page
 */
export function paintCloud({ clouds, frame, paper }: CloudView, ratio: number): Painting {
  const width = Math.max(1, Math.round(frame.width * ratio));
  const height = Math.max(1, Math.round(frame.height * ratio));
  const pixels = new Uint8ClampedArray(width * height * 4);
  const [red, green, blue] = channels(paper);
  // One number a pixel, opacity highest, as every machine that Chromium and Firefox run on has it.
  const dots = new Int32Array(pixels.buffer);
  dots.fill((255 << 24) | (blue << 16) | (green << 8) | red);
  const across = frame.width;
  const middles = new Uint32Array(across * frame.height);
  const crowd = new Uint8Array(middles.length);
  const area = { left: frame.margin.l, right: frame.width - frame.margin.r, top: frame.margin.t, bottom: frame.height - frame.margin.b };
  const edge = {
    left: Math.ceil(area.left * ratio),
    right: Math.floor(area.right * ratio) - 1,
    top: Math.ceil(area.top * ratio),
    bottom: Math.floor(area.bottom * ratio) - 1,
  };
  const [ax, bx] = line(frame.view.x[0], frame.view.x[1], area.left, area.right);
  const [ay, by] = line(frame.view.y[0], frame.view.y[1], area.bottom, area.top);
  let before = 0;
  for (const { x, y, lookOf, looks } of clouds) {
    const stamps = looks.map((look): Stamp => stampOf(look.shape, look.radius * ratio, look.alpha));
    const colors = looks.map((look) => channels(look.color));
    const places = stamps.map(({ dx, dy }) => Int32Array.from(dx, (x, k) => (dy[k] as number) * width + x));
    const reach = Math.max(0, ...stamps.map(({ dx, dy }) => Math.max(...dx, ...dy)));
    for (let i = 0; i < x.length; i++) {
      const look = lookOf[i] as number;
      if (look === nowhere) continue;
      const vx = frame.logX ? Math.log10(x[i] as number) : (x[i] as number);
      const vy = frame.logY ? Math.log10(y[i] as number) : (y[i] as number);
      const px = ax * vx + bx;
      const py = ay * vy + by;
      if (!(px >= area.left && px < area.right && py >= area.top && py < area.bottom)) continue;
      const place = (py | 0) * across + (px | 0);
      middles[place] = before + i + 1;
      const here = crowd[place] as number;
      if (here >= mostOnOnePlace) continue;
      crowd[place] = here + 1;
      const { dx, dy, cover } = stamps[look] as Stamp;
      const [r, g, b] = colors[look] as readonly [number, number, number];
      const cx = (px * ratio) | 0;
      const cy = (py * ratio) | 0;
      // Red and blue are mixed in one multiplication: eight bits lie free between them.
      const redBlue = r | (b << 16);
      const middle = cy * width + cx;
      const offsets = places[look] as Int32Array;
      const isWhole = cx - reach >= edge.left && cx + reach <= edge.right && cy - reach >= edge.top && cy + reach <= edge.bottom;
      for (let k = 0; k < offsets.length; k++) {
        if (!isWhole) {
          const sx = cx + (dx[k] as number);
          const sy = cy + (dy[k] as number);
          if (sx < edge.left || sx > edge.right || sy < edge.top || sy > edge.bottom) continue;
        }
        const at = middle + (offsets[k] as number);
        const part = cover[k] as number;
        const rest = 256 - part;
        const dot = dots[at] as number;
        const mixed = ((Math.imul(dot & 0xff00ff, rest) + Math.imul(redBlue, part)) >>> 8) & 0xff00ff;
        const green256 = Math.imul((dot >>> 8) & 0xff, rest) + Math.imul(g, part);
        dots[at] = (255 << 24) | mixed | (green256 & 0xff00);
      }
    }
    before += x.length;
  }
  return { pixels, width, height, ratio, middles, across };
}
