/**
 * What the bare paper looks like at every place of a picture, under uneven light.
 *
 * Input: RGBA pixels and the region that is read; not mutated. Output: a coarse grid of paper colours, to be interpolated between the tiles' middles, and
 * whether ink is darker than paper. Cost: a fixed number of samples per tile, a few passes over the grid.
 *
 * The paper is what most of a tile shows on its bright side (on its dark side for white ink on dark card). A tile that is all ink
 * stands out from the tiles round it and takes its colour from them. A picture with nothing but one colour is all paper.
 */
import type { Pixels } from './decode.ts';
import type { Region } from './region.ts';

export interface PaperGrid {
  tilePx: number;
  columns: number;
  rows: number;
  /** Red, green, blue per tile, 0 to 255, at least MIN_LEVEL. */
  colours: Float32Array;
  inkIsDarker: boolean;
}

/** About this many tiles along the longer side: 2 to 3 mm each on a letter sheet, wider than strokes are. */
const TILES_ALONG = 120;
const MIN_TILE_PX = 8;
/** Along a tile's side; 100 samples settle a percentile to a few per cent. */
const SAMPLES_ALONG = 10;
/** Share of a tile's samples, from the ink's side, after which paper is taken to begin, and where it ends. */
const PAPER_FROM = 0.55, PAPER_TO = 0.9;
/** Reach of the look round each tile, in tiles: about 20 mm to either side on a letter sheet. */
const NEIGHBOURHOOD = 8;
/** In a neighbourhood's order of brightness the paper stands here: solid ink may cover up to two thirds of it. */
const NEIGHBOURHOOD_RANK = 0.7;
/** A tile off the paper round it by more than this share is ink, not shade. */
const TILE_IS_INK = 0.1;
const SMOOTHING_TILES = 2;
/** Black card still reflects; keeps quotients finite. */
const MIN_LEVEL = 6;

export function luminance(r: number, g: number, b: number): number {
  return 0.299 * r + 0.587 * g + 0.114 * b;
}

export function estimatePaper(pixels: Pixels, region: Region): PaperGrid {
  const tilePx = Math.max(MIN_TILE_PX, Math.round(Math.max(pixels.width, pixels.height) / TILES_ALONG));
  const columns = Math.ceil(pixels.width / tilePx), rows = Math.ceil(pixels.height / tilePx);
  const samples: Float32Array[] = [];
  let darkTail = 0, lightTail = 0;
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      const sorted = sampleTile(pixels, region, column * tilePx, row * tilePx, tilePx);
      samples.push(sorted);
      if (sorted.length === 0) continue;
      const n = sorted.length / 4, at = (share: number) => sorted[4 * Math.min(n - 1, Math.floor(share * n))];
      darkTail += at(0.5) - at(0.02);
      lightTail += at(0.98) - at(0.5);
    }
  }
  const inkIsDarker = darkTail >= lightTail;
  const raw = new Float32Array(3 * columns * rows);
  samples.forEach((sorted, tile) => { if (sorted.length > 0) meanColour(sorted, inkIsDarker, raw, 3 * tile); });
  return { tilePx, columns, rows, colours: levelOutInk(raw, columns, rows, inkIsDarker), inkIsDarker };
}

/** Samples as luminance, red, green, blue, in ascending order of luminance; none for a tile outside the region. */
function sampleTile(pixels: Pixels, region: Region, x0: number, y0: number, tilePx: number): Float32Array {
  const x1 = Math.min(pixels.width, x0 + tilePx), y1 = Math.min(pixels.height, y0 + tilePx);
  const step = Math.max(1, Math.floor(tilePx / SAMPLES_ALONG));
  const found: { l: number; at: number }[] = [];
  for (let y = Math.min(y1 - 1, y0 + ((step - 1) >> 1)); y < y1; y += step) {
    const last = Math.min(x1, region.to[y]);
    for (let x = Math.max(Math.min(x1 - 1, x0 + ((step - 1) >> 1)), region.from[y]); x < last; x += step) {
      const at = 4 * (y * pixels.width + x);
      found.push({ l: luminance(pixels.rgba[at], pixels.rgba[at + 1], pixels.rgba[at + 2]), at });
    }
  }
  found.sort((a, b) => a.l - b.l);
  const sorted = new Float32Array(4 * found.length);
  found.forEach(({ l, at }, i) => sorted.set([l, pixels.rgba[at], pixels.rgba[at + 1], pixels.rgba[at + 2]], 4 * i));
  return sorted;
}

function meanColour(sorted: Float32Array, inkIsDarker: boolean, into: Float32Array, offset: number): void {
  const n = sorted.length / 4;
  const lower = inkIsDarker ? PAPER_FROM : 1 - PAPER_TO, upper = inkIsDarker ? PAPER_TO : 1 - PAPER_FROM;
  const from = Math.min(n - 1, Math.floor(lower * n)), to = Math.max(from + 1, Math.ceil(upper * n));
  for (let c = 0; c < 3; c++) {
    let sum = 0;
    for (let i = from; i < to; i++) sum += sorted[4 * i + 1 + c];
    into[offset + c] = Math.max(MIN_LEVEL, sum / (to - from));
  }
}

function levelOutInk(raw: Float32Array, columns: number, rows: number, inkIsDarker: boolean): Float32Array {
  const level = new Float32Array(columns * rows);
  for (let i = 0; i < level.length; i++) level[i] = luminance(raw[3 * i], raw[3 * i + 1], raw[3 * i + 2]);
  const weight = new Float32Array(columns * rows);
  const near: number[] = [];
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      near.length = 0;
      for (let r = Math.max(0, row - NEIGHBOURHOOD); r <= Math.min(rows - 1, row + NEIGHBOURHOOD); r += 2) {
        for (let c = Math.max(0, column - NEIGHBOURHOOD); c <= Math.min(columns - 1, column + NEIGHBOURHOOD); c += 2) if (level[r * columns + c] > 0) near.push(level[r * columns + c]);
      }
      near.sort((a, b) => (inkIsDarker ? a - b : b - a));
      const expected = near[Math.min(near.length - 1, Math.floor(NEIGHBOURHOOD_RANK * near.length))];
      const off = inkIsDarker ? expected - level[row * columns + column] : level[row * columns + column] - expected;
      const own = level[row * columns + column];
      weight[row * columns + column] = own === 0 ? 0 : off > TILE_IS_INK * Math.max(expected, 40) ? 1e-6 : 1;
    }
  }
  return smooth(raw, weight, columns, rows);
}

/** Mean of the neighbours that count, over a window that is doubled where none does. */
function smooth(raw: Float32Array, weight: Float32Array, columns: number, rows: number): Float32Array {
  const smoothed = new Float32Array(raw.length);
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      for (let reach = SMOOTHING_TILES; ; reach *= 2) {
        let sum = 0, red = 0, green = 0, blue = 0;
        for (let r = Math.max(0, row - reach); r <= Math.min(rows - 1, row + reach); r++) {
          for (let c = Math.max(0, column - reach); c <= Math.min(columns - 1, column + reach); c++) {
            const i = r * columns + c, w = weight[i] / (1 + (r - row) ** 2 + (c - column) ** 2);
            sum += w; red += w * raw[3 * i]; green += w * raw[3 * i + 1]; blue += w * raw[3 * i + 2];
          }
        }
        if (sum < 1e-3 && reach < Math.max(columns, rows)) continue;
        const known = sum > 0 ? 1 / sum : 0;
        for (const [c, total] of [red, green, blue].entries()) smoothed[3 * (row * columns + column) + c] = Math.max(MIN_LEVEL, total * known);
        break;
      }
    }
  }
  return smoothed;
}
