/**
 * How much each pixel differs from the paper under it, as one byte: 0 is bare paper, INK_LEVEL the picture's usual full ink.
 *
 * The difference is the weighted distance of the colour from the local paper's, both divided by the paper's, so that light falling
 * unevenly cancels out and coloured ink counts like black. A pixel half covered by ink has half the value, which is what places
 * an outline between two pixels' middles.
 *
 * Input: pixels, paper and the region that is read; not mutated. Output: the map, 0 outside the region, in the pixels' own orientation, and how strong the paper's grain is in it.
 * No ink at all is a typed result. Cost: one pass over the pixels.
 */
import type { Pixels } from './decode.ts';
import type { PaperGrid } from './paper.ts';
import { regionPixels, type Region } from './region.ts';

export interface InkMap {
  width: number;
  height: number;
  values: Uint8Array;
  /** Nine tenths of the bare paper lies below this, in the map's units. */
  grain: number;
}

export const INK_LEVEL = 200;
/** By how much a channel speaks: near what the eye weighs, with blue, the noisiest of a camera, not quite left out. */
const WEIGHTS = [0.3, 0.5, 0.2];
/** Fainter than this share of the paper's brightness is no ink: paper's own marks, show-through. */
const FAINTEST_INK = 0.09;
/** Pixels looked at to set the scale. */
const SAMPLES = 400_000;
const BINS = 4096, BINS_PER_UNIT = 256;

export function mapInk(pixels: Pixels, paper: PaperGrid, region: Region): InkMap | null {
  const row = paperRow(pixels, paper);
  const step = Math.max(1, Math.floor(Math.sqrt(regionPixels(region) / SAMPLES)));
  const histogram = new Float64Array(BINS);
  let counted = 0;
  for (let y = step >> 1; y < pixels.height; y += step) {
    row.load(y);
    for (let x = region.from[y] + (step >> 1); x < region.to[y]; x += step, counted++) histogram[Math.min(BINS - 1, Math.floor(row.difference(x, y) * BINS_PER_UNIT))]++;
  }
  const grain = (percentile(histogram, counted * 0.5, 0) + 1) / BINS_PER_UNIT;
  const faintest = Math.max(FAINTEST_INK, 6 * grain);
  let inked = 0;
  const from = Math.ceil(faintest * BINS_PER_UNIT);
  for (let bin = from; bin < BINS; bin++) inked += histogram[bin];
  if (inked === 0) return null;
  const level = (percentile(histogram, inked * 0.6, from) + 0.5) / BINS_PER_UNIT;

  const values = new Uint8Array(pixels.width * pixels.height);
  const scale = INK_LEVEL / level;
  for (let y = 0; y < pixels.height; y++) {
    row.load(y);
    row.write(y, region.from[y], region.to[y], scale, values);
  }
  return { width: pixels.width, height: pixels.height, values, grain: 1.8 * grain * scale };
}

function percentile(histogram: Float64Array, wanted: number, from: number): number {
  let sum = 0;
  for (let bin = from; bin < histogram.length; bin++) {
    sum += histogram[bin];
    if (sum >= wanted) return bin;
  }
  return histogram.length - 1;
}

/** One over the paper's colour along a line of pixels, interpolated from the grid. */
function paperRow(pixels: Pixels, paper: PaperGrid) {
  const { width, rgba } = pixels;
  const { tilePx, columns, rows, colours } = paper;
  const inverse = new Float32Array(3 * width);
  // One column more than there are, so that the last tile has a neighbour too.
  const line = new Float32Array(3 * (columns + 1));
  const tileAt = new Int32Array(width), share = new Float32Array(width);
  for (let x = 0; x < width; x++) {
    const u = Math.min(columns - 1, Math.max(0, (x + 0.5) / tilePx - 0.5));
    tileAt[x] = 3 * Math.floor(u);
    share[x] = u - Math.floor(u);
  }
  const [wr, wg, wb] = WEIGHTS;

  function load(y: number): void {
    const v = Math.min(rows - 1, Math.max(0, (y + 0.5) / tilePx - 0.5)), r0 = Math.floor(v), r1 = Math.min(rows - 1, r0 + 1), f = v - r0;
    for (let i = 0; i < 3 * columns; i++) line[i] = 1 / (colours[3 * columns * r0 + i] * (1 - f) + colours[3 * columns * r1 + i] * f);
    for (let c = 0; c < 3; c++) line[3 * columns + c] = line[3 * columns - 3 + c];
    for (let x = 0, to = 0; x < width; x++, to += 3) {
      const t = tileAt[x], g = share[x];
      inverse[to] = line[t] + (line[t + 3] - line[t]) * g;
      inverse[to + 1] = line[t + 1] + (line[t + 4] - line[t + 1]) * g;
      inverse[to + 2] = line[t + 2] + (line[t + 5] - line[t + 2]) * g;
    }
  }
  function difference(x: number, y: number): number {
    const at = 4 * (y * width + x);
    const r = 1 - rgba[at] * inverse[3 * x], g = 1 - rgba[at + 1] * inverse[3 * x + 1], b = 1 - rgba[at + 2] * inverse[3 * x + 2];
    return Math.sqrt(wr * r * r + wg * g * g + wb * b * b);
  }
  function write(y: number, first: number, end: number, scale: number, values: Uint8Array): void {
    for (let x = first, at = 4 * (y * width + x), i = 3 * x, to = y * width + x; x < end; x++, at += 4, i += 3, to++) {
      const r = 1 - rgba[at] * inverse[i], g = 1 - rgba[at + 1] * inverse[i + 1], b = 1 - rgba[at + 2] * inverse[i + 2];
      const value = Math.sqrt(wr * r * r + wg * g * g + wb * b * b) * scale;
      values[to] = value >= 255 ? 255 : value + 0.5;
    }
  }
  return { load, difference, write };
}
