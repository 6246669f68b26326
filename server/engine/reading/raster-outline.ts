/**
 * An outline filled into a small grey picture, ink black on white, for reading words.
 *
 * Input: an outline, even-odd, origin at its box's top left, and pixels per unit; not mutated. Output: one byte a pixel, each the mean of
 * SUBLINES lines with exact coverage along the line, with MARGIN_PX of white around. Cost: lines times edges crossed.
 */
import { outlineBox } from '../geometry/ring.ts';
import type { Outline } from '../geometry/types.ts';

export interface GreyPicture { width: number; height: number; values: Uint8Array }

const SUBLINES = 4;
export const MARGIN_PX = 20;

export function rasterOutline(outline: Outline, pxPerUnit: number, mirrored = false): GreyPicture {
  const box = outlineBox(outline);
  const width = Math.ceil(box.w * pxPerUnit) + 2 * MARGIN_PX, height = Math.ceil(box.h * pxPerUnit) + 2 * MARGIN_PX;
  const covered = new Float32Array(width * height);
  const toX = (x: number) => MARGIN_PX + (mirrored ? box.x + box.w - x : x - box.x) * pxPerUnit, toY = (y: number) => MARGIN_PX + (y - box.y) * pxPerUnit;
  const crossings: number[][] = Array.from({ length: height * SUBLINES }, () => []);
  for (const ring of outline.rings) {
    ring.forEach((p, i) => {
      const q = ring[(i + 1) % ring.length], y0 = toY(p.y) * SUBLINES, y1 = toY(q.y) * SUBLINES, x0 = toX(p.x), x1 = toX(q.x);
      for (let line = Math.ceil(Math.min(y0, y1) - 0.5); line < Math.max(y0, y1) - 0.5; line++) crossings[line].push(x0 + ((line + 0.5 - y0) / (y1 - y0)) * (x1 - x0));
    });
  }
  crossings.forEach((places, line) => {
    places.sort((a, b) => a - b);
    for (let i = 0; i + 1 < places.length; i += 2) addSpan(covered, Math.floor(line / SUBLINES) * width, places[i], places[i + 1]);
  });
  return { width, height, values: Uint8Array.from(covered, (c) => 255 - 255 * Math.min(1, c / SUBLINES)) };
}

function addSpan(covered: Float32Array, line: number, from: number, to: number): void {
  for (let x = Math.floor(from); x < to; x++) covered[line + x] += Math.min(x + 1, to) - Math.max(x, from);
}
