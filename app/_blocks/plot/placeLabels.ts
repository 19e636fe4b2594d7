/** Something that a label must not cover: a point, in pixels. */
export interface Obstacle {
  readonly x: number;
  readonly y: number;
}

export interface LabelRequest {
  readonly x: number;
  readonly y: number;
  /** Size of the text in pixels. */
  readonly width: number;
  readonly height: number;
  /** How far the text keeps from its point. */
  readonly gap: number;
}

/** Where a label's box begins: its left and top edge, in pixels. */
export interface LabelPlace {
  readonly left: number;
  readonly top: number;
}

export interface Box {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

// Right of the point first, as people read; then around it.
const directions = [
  [1, -1],
  [1, 1],
  [-1, -1],
  [-1, 1],
  [1, 0],
  [-1, 0],
  [0, -1],
  [0, 1],
] as const;

export function overlap(a: Box, b: Box): number {
  const w = Math.min(a.right, b.right) - Math.max(a.left, b.left);
  const h = Math.min(a.bottom, b.bottom) - Math.max(a.top, b.top);
  return w > 0 && h > 0 ? w * h : 0;
}

/**
 * Places labels beside their points, one after the other, each where it covers least: first no other label, then few
 * points, never outside the frame if it can be helped. Greedy and without chance, so that a drawing looks the same each time.
 *
 * @param taken boxes of text that stand already
 */
export function placeLabels(requests: readonly LabelRequest[], obstacles: readonly Obstacle[], frame: Box, taken: readonly Box[] = []): LabelPlace[] {
  const placed: Box[] = [...taken];
  return requests.map((label) => {
    let best: Box | null = null;
    let cost = Infinity;
    directions.forEach(([dx, dy], order) => {
      for (const reach of [1, 2.4]) {
        const gap = label.gap * reach;
        const left = dx > 0 ? label.x + gap : dx < 0 ? label.x - gap - label.width : label.x - label.width / 2;
        const top = dy > 0 ? label.y + gap * (dx === 0 ? 1 : 0.4) : dy < 0 ? label.y - gap * (dx === 0 ? 1 : 0.4) - label.height : label.y - label.height / 2;
        const box = { left, top, right: left + label.width, bottom: top + label.height };
        let c = order * 0.5 + (reach - 1) * 2;
        for (const other of placed) c += overlap(box, other) * 5;
        for (const o of obstacles) if (o.x > box.left - 4 && o.x < box.right + 4 && o.y > box.top - 3 && o.y < box.bottom + 3) c += 12;
        c += (box.right - box.left) * (box.bottom - box.top) * 3 - overlap(box, frame) * 3;
        if (c < cost) {
          cost = c;
          best = box;
        }
      }
    });
    const box: Box = best ?? { left: label.x, top: label.y, right: label.x, bottom: label.y };
    placed.push(box);
    return { left: box.left, top: box.top };
  });
}

/** Width of a text in 12 px IBM Plex Sans, near enough to keep labels apart. */
export function roughWidth(text: string, size = 12): number {
  return text.length * size * 0.56;
}
