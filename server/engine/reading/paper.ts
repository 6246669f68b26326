/**
 * What the bare paper looks like at every place of a picture, under uneven light.
 *
 * Input: RGBA pixels and the region that is read; not mutated. Output: a coarse grid of paper colours, to be interpolated between the tiles' middles, and
 * whether ink is darker than paper. Cost: a fixed number of samples per tile, a few passes over the grid.
 *
 * The paper is what most of a tile shows on its bright side (on its dark side for white ink on dark card). Tiles that are even in themselves and go
 * over into one another gently are the paper, in light and in shadow; solid ink begins at once and is not reached. Other tiles count
 * where they agree with the paper round them, else they take its colour. A picture of nothing but one colour is all paper.
 */
import type { Pixels } from './decode.ts';
import { DisjointSets } from './gaps.ts';
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
/** A tile whose samples spread by more than this share of its brightness, and by this many times the usual, has ink or an edge in it. */
const EVEN_SHARE = 0.06, EVEN_TIMES = 2.2;
/** Even tiles this near (in tiles) and this much alike are one surface: light falls off gently, ink begins at once. */
const SURFACE_REACH = 2, SURFACE_STEP = 0.06;
/** A surface other than the largest is paper too, in a hard shadow, from this share of all tiles on; solid ink is smaller. */
const SECOND_PAPER = 0.2;
/** Of a sheet all covered with type so few tiles are even that every tile must speak for itself. */
const LEAST_EVEN = 0.04;
/** A tile with ink in it off the paper round it by more than this share is mostly ink. */
const TILE_IS_INK = 0.1;
const SMOOTHING_TILES = 2;
/** Differences below this brightness count from it: of the dark a sensor tells little. */
const DARK = 40;
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
  const raw = new Float32Array(3 * columns * rows), spread = Float32Array.from(samples, relativeSpread);
  samples.forEach((sorted, tile) => { if (sorted.length > 0) meanColour(sorted, inkIsDarker, raw, 3 * tile); });
  return { tilePx, columns, rows, colours: levelOutInk(raw, spread, columns, rows), inkIsDarker };
}

/** More places than any picture has pixels, and steps per level of brightness: both fit a double's 53 bits. */
const PLACES = 2 ** 28, BRIGHTNESS_STEPS = 64;

/** Samples as luminance, red, green, blue, in ascending order of luminance; none for a tile outside the region. */
function sampleTile(pixels: Pixels, region: Region, x0: number, y0: number, tilePx: number): Float32Array {
  const x1 = Math.min(pixels.width, x0 + tilePx), y1 = Math.min(pixels.height, y0 + tilePx);
  const step = Math.max(1, Math.floor(tilePx / SAMPLES_ALONG));
  // Brightness and place in one number, so that the sort is one of plain numbers.
  const keys = new Float64Array((Math.ceil((y1 - y0) / step) + 1) * (Math.ceil((x1 - x0) / step) + 1));
  let n = 0;
  for (let y = Math.min(y1 - 1, y0 + ((step - 1) >> 1)); y < y1; y += step) {
    const last = Math.min(x1, region.to[y]);
    for (let x = Math.max(Math.min(x1 - 1, x0 + ((step - 1) >> 1)), region.from[y]); x < last; x += step) {
      const at = 4 * (y * pixels.width + x);
      keys[n++] = Math.round(luminance(pixels.rgba[at], pixels.rgba[at + 1], pixels.rgba[at + 2]) * BRIGHTNESS_STEPS) * PLACES + at / 4;
    }
  }
  const sorted = new Float32Array(4 * n);
  keys.subarray(0, n).sort().forEach((key, i) => {
    const at = 4 * (key % PLACES);
    sorted[4 * i] = Math.floor(key / PLACES) / BRIGHTNESS_STEPS;
    for (let c = 0; c < 3; c++) sorted[4 * i + 1 + c] = pixels.rgba[at + c];
  });
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

/** Of all but a tenth of a tile's samples, as a share of their middle; none for a tile outside the region. */
function relativeSpread(sorted: Float32Array): number {
  const n = sorted.length / 4, at = (share: number) => sorted[4 * Math.min(n - 1, Math.floor(share * n))];
  return n === 0 ? Infinity : (at(0.95) - at(0.05)) / Math.max(at(0.5), DARK);
}

/** Even tiles that go over into one another are paper; tiles with ink count where they agree with the paper round them. */
function levelOutInk(raw: Float32Array, spread: Float32Array, columns: number, rows: number): Float32Array {
  const level = new Float32Array(columns * rows);
  for (let i = 0; i < level.length; i++) level[i] = luminance(raw[3 * i], raw[3 * i + 1], raw[3 * i + 2]);
  const weight = new Float32Array(columns * rows);
  const paper = paperTiles(level, spread, columns, rows);
  if (!paper) return smooth(raw, level.map((l) => (l > 0 ? 1 : 0)), columns, rows);
  for (const i of paper) weight[i] = 1;
  const first = smooth(raw, weight, columns, rows);
  for (let i = 0; i < level.length; i++) {
    const expected = luminance(first[3 * i], first[3 * i + 1], first[3 * i + 2]);
    if (level[i] > 0 && weight[i] === 0 && Math.abs(level[i] - expected) < TILE_IS_INK * Math.max(expected, DARK)) weight[i] = 1;
  }
  return smooth(raw, weight, columns, rows);
}

/** Null where too few tiles are even to tell. */
function paperTiles(level: Float32Array, spread: Float32Array, columns: number, rows: number): number[] | null {
  const known = spread.filter((s) => s < Infinity).sort();
  const limit = Math.max(EVEN_SHARE, EVEN_TIMES * (known[known.length >> 1] ?? 0));
  const sets = new DisjointSets(level.length);
  const alike = (i: number, j: number) => spread[i] <= limit && spread[j] <= limit && Math.abs(level[i] - level[j]) < SURFACE_STEP * Math.max(level[i], level[j], DARK);
  for (let row = 0, i = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++, i++) {
      for (let d = 1; d <= SURFACE_REACH; d++) {
        if (column >= d && alike(i, i - d)) sets.join(i, i - d);
        if (row >= d && alike(i, i - d * columns)) sets.join(i, i - d * columns);
      }
    }
  }
  const surfaces = new Map<number, number[]>();
  spread.forEach((s, i) => {
    if (s > limit) return;
    const leader = sets.find(i), tiles = surfaces.get(leader);
    if (tiles) tiles.push(i); else surfaces.set(leader, [i]);
  });
  const [largest, ...others] = [...surfaces.values()].sort((a, b) => b.length - a.length);
  if (!largest || largest.length < LEAST_EVEN * known.length) return null;
  return [...largest, ...others.filter((tiles) => tiles.length > SECOND_PAPER * known.length).flat()];
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
