/**
 * Which pixels of an ink map are ink, and how surely: the level that separates ink from paper at each place.
 *
 * A pixel is ink where it has more than half the strength of the strongest ink within reach of it, so that the edge of grey ink is found
 * half way to grey and a hairline, too thin to come out at full strength, half way to its own. Below `floor` nothing is ink.
 *
 * `fieldAt` is the same as a signed number, 0 on the edge, to interpolate the edge between two pixels. Neither mutates the map.
 * Cost: one pass; the neighbourhood is looked at for faint pixels only.
 */
import { INK_LEVEL, type InkMap } from './ink-map.ts';

export interface InkMask {
  width: number;
  height: number;
  values: Uint8Array;
  /** 1 where there is ink. */
  ink: Uint8Array;
  floor: number;
  /** How far full ink is looked for, px. */
  reach: number;
}

/** As wide as an edge's blur reaches: full ink is seen within it. At least that of a good scan, at most half of a small letter's white. */
const REACH_PX = { least: 2, most: 6 }, REACH_BLURS = 1.5;
/** Every so-many-th pixel is asked for the blur. */
const BLUR_STRIDE = 7;
/** Fainter than this share of the picture's usual ink is no ink beside it. */
const FAINTEST_SHARE = 0.2;
/** Grain this many times what nine tenths of the paper shows is not expected in single pixels. */
const GRAIN_TIMES = 2.5;

export function maskInk(map: InkMap): InkMask {
  const { width, height, values } = map;
  const floor = Math.min(0.6 * INK_LEVEL, Math.max(FAINTEST_SHARE * INK_LEVEL, GRAIN_TIMES * map.grain));
  const mask: InkMask = { width, height, values, ink: new Uint8Array(values.length), floor, reach: reachFor(map) };
  for (let y = 0, i = 0; y < height; y++) {
    for (let x = 0; x < width; x++, i++) {
      const value = values[i];
      // No neighbour can be more than twice as strong as 128.
      if (value > floor && (value >= 128 || value > 0.5 * strongestNear(mask, x, y))) mask.ink[i] = 1;
    }
  }
  return mask;
}

/** From the steepness of edges where they are half ink: a step blurred by a Gaussian rises by 1/(σ√2π) of its height per pixel. */
function reachFor({ width, height, values }: InkMap): number {
  const blurs: number[] = [];
  for (let i = width + 1; i < width * (height - 1) - 1; i += BLUR_STRIDE) {
    if (values[i] < 0.4 * INK_LEVEL || values[i] > 0.6 * INK_LEVEL) continue;
    const steepness = Math.hypot(values[i + 1] - values[i - 1], values[i + width] - values[i - width]) / 2;
    if (steepness > 0) blurs.push(INK_LEVEL / (steepness * Math.sqrt(2 * Math.PI)));
  }
  const blur = blurs.sort((a, b) => a - b)[blurs.length >> 1] ?? 0;
  return Math.min(REACH_PX.most, Math.max(REACH_PX.least, Math.round(REACH_BLURS * blur)));
}

export function fieldAt(mask: InkMask, x: number, y: number): number {
  return mask.values[y * mask.width + x] - Math.max(mask.floor, 0.5 * strongestNear(mask, x, y));
}

function strongestNear(mask: InkMask, x: number, y: number): number {
  const x0 = Math.max(0, x - mask.reach), x1 = Math.min(mask.width - 1, x + mask.reach);
  const y0 = Math.max(0, y - mask.reach), y1 = Math.min(mask.height - 1, y + mask.reach);
  let strongest = 0;
  for (let row = y0; row <= y1; row++) {
    for (let i = row * mask.width + x0, end = row * mask.width + x1; i <= end; i++) if (mask.values[i] > strongest) strongest = mask.values[i];
  }
  return strongest;
}
