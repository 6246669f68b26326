/**
 * Turning a picture upright as EXIF asks, and flipping it where it shows stamps' faces.
 *
 * Orientation o (1 to 8, CIPA DC-008 §4.6.5) says how the stored picture lies; `uprightPlace` tells where a place of the stored picture
 * comes to lie, in continuous pixel coordinates (pixel edges at whole numbers), `turnUpright` moves a one-byte map. Inputs are not mutated.
 */
import type { Point } from '../geometry/types.ts';

export interface Turning {
  /** Of the stored picture. */
  width: number;
  height: number;
  orientation: number;
  /** Left to right, after turning upright. */
  mirrored: boolean;
}

export function uprightSize(turning: Turning): { width: number; height: number } {
  const { width, height, orientation } = turning;
  return orientation >= 5 ? { width: height, height: width } : { width, height };
}

/** Upright x = a·x + b·y + c, y = d·x + e·y + f: only whole turns and flips. */
function matrix(turning: Turning): [number, number, number, number, number, number] {
  const { width: w, height: h, orientation, mirrored } = turning;
  const [a, b, c, d, e, f] = (
    {
      1: [1, 0, 0, 0, 1, 0], 2: [-1, 0, w, 0, 1, 0], 3: [-1, 0, w, 0, -1, h], 4: [1, 0, 0, 0, -1, h],
      5: [0, 1, 0, 1, 0, 0], 6: [0, -1, h, 1, 0, 0], 7: [0, -1, h, -1, 0, w], 8: [0, 1, 0, -1, 0, w],
    } as Record<number, number[]>
  )[orientation];
  return mirrored ? [-a, -b, uprightSize(turning).width - c, d, e, f] : [a, b, c, d, e, f];
}

export function uprightPlace(turning: Turning, p: Point): Point {
  const [a, b, c, d, e, f] = matrix(turning);
  return { x: a * p.x + b * p.y + c, y: d * p.x + e * p.y + f };
}

export function storedPlace(turning: Turning, p: Point): Point {
  const [a, b, c, d, e, f] = matrix(turning);
  // The linear part is orthogonal: its inverse is its transpose.
  return { x: a * (p.x - c) + d * (p.y - f), y: b * (p.x - c) + e * (p.y - f) };
}

export function turnUpright(values: Uint8Array, turning: Turning): Uint8Array {
  if (turning.orientation === 1 && !turning.mirrored) return values;
  const { width, height } = turning;
  const turned = new Uint8Array(values.length), upright = uprightSize(turning);
  const first = uprightPlace(turning, { x: 0.5, y: 0.5 }), right = uprightPlace(turning, { x: 1.5, y: 0.5 }), below = uprightPlace(turning, { x: 0.5, y: 1.5 });
  const index = (p: Point) => Math.floor(p.y) * upright.width + Math.floor(p.x);
  const stepX = index(right) - index(first), stepY = index(below) - index(first);
  for (let y = 0, line = index(first), from = 0; y < height; y++, line += stepY) {
    for (let x = 0, to = line; x < width; x++, to += stepX) turned[to] = values[from++];
  }
  return turned;
}
