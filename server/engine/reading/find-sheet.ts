/**
 * Where in a picture the stamped paper lies: on a desk, on a scanner's lid, or on another paper.
 *
 * Input: pixels and the region looked at; not mutated. Output: the polygon within which ink is read, and the sheet's four corners where it shows them;
 * null where the paper fills the region. Places are those of the pixels given.
 *
 * Cells of the reduced picture that are even in themselves and hardly differ from their neighbours grow together into surfaces; light falls off so
 * gently that it does not part them. Cells with an edge across them join nothing: along a slanting edge they would lead from one side to the other by
 * small steps. The surface that reaches farthest round is the paper, or else the ground on which a paper lies: a four-sided surface of its
 * own that holds most of what else is in the picture. Corners are where straight lines along its edges meet, fitted at full size.
 * Cost: CELL_SAMPLES² pixels per cell, about CELLS_ALONG² cells.
 */
import { convexHull } from '../geometry/hull.ts';
import { ringContains, signedArea } from '../geometry/ring.ts';
import type { Point } from '../geometry/types.ts';
import type { Pixels } from './decode.ts';
import { DisjointSets } from './gaps.ts';
import { fitLine, meetingPlace, type Line } from './line-fit.ts';
import { luminance } from './paper.ts';
import { insetPolygon, type Region } from './region.ts';

export interface FoundSheet {
  polygon: Point[];
  /** In order, clockwise as seen; null where the sheet is cut off or not four-sided. */
  corners: Point[] | null;
}

const CELLS_ALONG = 320, CELL_SAMPLES = 4;
/** Neighbouring cells that differ by less are one surface: half of what counts as ink, since an edge may fall across a cell. */
const SAME_SURFACE = 0.045;
/** Nor do steps part a surface that are this many times the usual one between cells: grain, which weighs more the darker the paper. */
const GRAIN_TIMES = 3;
/** Of the dark the eye and the sensor tell little: differences below this brightness count from it. */
const DARK = 40;
/** A cell whose brightness spreads by more than this share, and by this many times the usual, has an edge in it. */
const UNEVEN_SHARE = 0.035, UNEVEN_TIMES = 2.2;
/** Shares of the region: smaller is no paper; larger fills it. */
const LEAST_PAPER = 0.12, FILLS = 0.985;
/** Paper darker than its ground, by less or by more than DEEP, must be larger than a label of solid ink: these shares of the ground's hull. */
const LEAST_DARKER = 0.3, LEAST_DEEP = 0.45, DEEP = 0.5;
/** Share of its hull that a four-sided surface fills, and share of a hull's area that its best four corners keep. */
const QUAD_FILL = 0.93;
/** Cells within this share of the paper's brightness look like it; more than that share of all beyond its edge, and it is no edge. */
const ALIKE = 0.08, GOES_ON = 0.3;
/** A paper on another must hold this share of what stands out on both. */
const HOLDS_DETAIL = 0.7;

interface Cells {
  factor: number; columns: number; rows: number;
  colours: Float32Array;
  /** 0 outside the region. */
  known: Uint8Array;
  /** 1 where an edge or other detail runs across. */
  uneven: Uint8Array;
}
interface Surface { cells: number; hull: Point[]; leader: number; level: number }

export function findSheet(pixels: Pixels, region: Region): FoundSheet | null {
  const cells = reduceToCells(pixels, region);
  const total = cells.known.reduce((sum, k) => sum + k, 0);
  const labels = growSurfaces(cells);
  const surfaces = largeSurfaces(cells, labels, LEAST_PAPER * total);
  if (surfaces.length === 0) return null;
  const ground = surfaces.reduce((widest, s) => (hullArea(s) > hullArea(widest) ? s : widest));
  const paper = surfaces.find((inner) => inner !== ground && liesOn(cells, labels, inner, ground)) ?? ground;
  const hullCells = hullArea(paper);
  if (hullCells > FILLS * total || goesOnBeyond(cells, paper)) return null;

  const quad = bestQuad(paper.hull);
  const px = (p: Point) => ({ x: p.x * cells.factor, y: p.y * cells.factor });
  if (quad && Math.abs(signedArea(quad)) > QUAD_FILL * hullCells && quad.every((p) => isInside(p, cells))) {
    const corners = refine(pixels, quad.map(px), cells.factor);
    return { polygon: insetPolygon(corners, Math.max(3, cells.factor / 2)), corners };
  }
  return { polygon: insetPolygon(paper.hull.map(px), 1.5 * cells.factor), corners: null };
}

/** Beyond a paper's edge all is different; where it looks the same, a frame or a row of letters was taken for the edge. */
function goesOnBeyond({ columns, rows, known, uneven, colours }: Cells, paper: Surface): boolean {
  let beyond = 0, alike = 0;
  for (let row = 0, i = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++, i++) {
      if (!known[i] || uneven[i] || ringContains(paper.hull, { x: column + 0.5, y: row + 0.5 })) continue;
      beyond++;
      if (Math.abs(luminance(colours[3 * i], colours[3 * i + 1], colours[3 * i + 2]) - paper.level) < ALIKE * paper.level) alike++;
    }
  }
  return alike > GOES_ON * beyond;
}

function hullArea(surface: Surface): number {
  return Math.abs(signedArea(surface.hull));
}

/** A corner at the picture's border is where the sheet is cut off. */
function isInside(p: Point, cells: Cells): boolean {
  return p.x > 1.5 && p.y > 1.5 && p.x < cells.columns - 1.5 && p.y < cells.rows - 1.5;
}

function reduceToCells(pixels: Pixels, region: Region): Cells {
  const factor = Math.max(1, Math.ceil(Math.max(pixels.width, pixels.height) / CELLS_ALONG));
  const columns = Math.max(1, Math.floor(pixels.width / factor)), rows = Math.max(1, Math.floor(pixels.height / factor));
  const cells: Cells = { factor, columns, rows, colours: new Float32Array(3 * columns * rows), known: new Uint8Array(columns * rows), uneven: new Uint8Array(columns * rows) };
  const spreads = new Float32Array(columns * rows);
  for (let row = 0, cell = 0; row < rows; row++) {
    const y0 = row * factor, y1 = y0 + factor - 1;
    for (let column = 0; column < columns; column++, cell++) {
      const x0 = column * factor, x1 = x0 + factor;
      if (x0 < Math.max(region.from[y0], region.from[y1]) || x1 > Math.min(region.to[y0], region.to[y1])) continue;
      cells.known[cell] = 1;
      spreads[cell] = sampleCell(pixels, x0, y0, factor, cells.colours, 3 * cell);
    }
  }
  const usual = spreads.filter((_, i) => cells.known[i] === 1).sort();
  const limit = Math.max(UNEVEN_SHARE, UNEVEN_TIMES * (usual[usual.length >> 1] ?? 0));
  spreads.forEach((spread, i) => { if (spread > limit) cells.uneven[i] = 1; });
  return cells;
}

/** Writes the mean colour; answers with the standard deviation of the brightness as a share of its mean. */
function sampleCell(pixels: Pixels, x0: number, y0: number, factor: number, colours: Float32Array, at: number): number {
  const samples = Math.min(factor, CELL_SAMPLES), step = factor / samples, n = samples * samples;
  let sum = 0, squares = 0;
  for (let i = 0; i < samples; i++) {
    for (let j = 0; j < samples; j++) {
      const from = 4 * ((y0 + Math.floor((i + 0.5) * step)) * pixels.width + x0 + Math.floor((j + 0.5) * step));
      const r = pixels.rgba[from], g = pixels.rgba[from + 1], b = pixels.rgba[from + 2], l = luminance(r, g, b);
      colours[at] += r / n; colours[at + 1] += g / n; colours[at + 2] += b / n;
      sum += l; squares += l * l;
    }
  }
  return Math.sqrt(Math.max(0, squares / n - (sum / n) ** 2)) / Math.max(sum / n, DARK);
}

function growSurfaces({ columns, rows, colours, known, uneven }: Cells): Int32Array {
  const sets = new DisjointSets(columns * rows);
  const steps: number[] = [];
  for (let i = 1; i < columns * rows; i++) if (known[i] && known[i - 1] && !uneven[i] && !uneven[i - 1]) steps.push(Math.abs(colours[3 * i + 1] - colours[3 * i - 2]));
  const grain = GRAIN_TIMES * (steps.sort((a, b) => a - b)[steps.length >> 1] ?? 0);
  const same = (i: number, j: number) => {
    if (!known[i] || !known[j] || uneven[i] || uneven[j]) return false;
    for (let c = 0; c < 3; c++) {
      const p = colours[3 * i + c], q = colours[3 * j + c];
      if (Math.abs(p - q) > Math.max(grain, SAME_SURFACE * Math.max(p, q, DARK))) return false;
    }
    return true;
  };
  for (let row = 0, i = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++, i++) {
      if (column > 0 && same(i, i - 1)) sets.join(i, i - 1);
      if (row > 0 && same(i, i - columns)) sets.join(i, i - columns);
    }
  }
  return Int32Array.from({ length: columns * rows }, (_, i) => (known[i] ? sets.find(i) : -1));
}

/** In descending order of size. */
function largeSurfaces(cells: Cells, labels: Int32Array, least: number): Surface[] {
  const counts = new Map<number, number>();
  for (const label of labels) if (label >= 0) counts.set(label, (counts.get(label) ?? 0) + 1);
  const large = [...counts].filter(([, n]) => n >= least).sort((a, b) => b[1] - a[1]);
  return large.map(([leader, count]) => ({ leader, cells: count, hull: convexHull(edgePlaces(cells, labels, leader)), level: meanLevel(cells, labels, leader, count) }));
}

function meanLevel({ colours }: Cells, labels: Int32Array, leader: number, count: number): number {
  let sum = 0;
  labels.forEach((label, i) => { if (label === leader) sum += luminance(colours[3 * i], colours[3 * i + 1], colours[3 * i + 2]); });
  return sum / count;
}

/** Corners of the first and last cell of each row: enough for a hull. */
function edgePlaces({ columns, rows }: Cells, labels: Int32Array, leader: number): Point[] {
  const places: Point[] = [];
  for (let row = 0; row < rows; row++) {
    let first = -1, last = -1;
    for (let column = 0; column < columns; column++) if (labels[row * columns + column] === leader) { if (first < 0) first = column; last = column; }
    if (first >= 0) places.push({ x: first, y: row }, { x: first, y: row + 1 }, { x: last + 1, y: row }, { x: last + 1, y: row + 1 });
  }
  return places;
}

function liesOn(cells: Cells, labels: Int32Array, inner: Surface, outer: Surface): boolean {
  const least = inner.level >= outer.level ? 0 : inner.level > DEEP * outer.level ? LEAST_DARKER : LEAST_DEEP;
  if (hullArea(inner) < least * hullArea(outer)) return false;
  const quad = bestQuad(inner.hull);
  if (!quad || Math.abs(signedArea(quad)) < QUAD_FILL * hullArea(inner)) return false;
  let within = 0, around = 0;
  for (let row = 0, i = 0; row < cells.rows; row++) {
    for (let column = 0; column < cells.columns; column++, i++) {
      if (!cells.known[i] || labels[i] === inner.leader || labels[i] === outer.leader) continue;
      const middle = { x: column + 0.5, y: row + 0.5 };
      // A cell across the inner paper's own edge is of neither.
      if (ringContains(insetPolygon(quad, 2), middle)) within++;
      else if (!ringContains(insetPolygon(quad, -2), middle) && ringContains(outer.hull, middle)) around++;
    }
  }
  return within > 0 && within >= HOLDS_DETAIL * (within + around);
}

/** Corners are left out one by one, the one whose going loses least area first, until four are left. */
function bestQuad(hull: readonly Point[]): Point[] | null {
  const corners = [...hull];
  while (corners.length > 4) {
    let least = Infinity, gone = 0;
    corners.forEach((b, i) => {
      const a = corners[(i + corners.length - 1) % corners.length], c = corners[(i + 1) % corners.length];
      const loss = Math.abs((b.x - a.x) * (c.y - a.y) - (b.y - a.y) * (c.x - a.x));
      if (loss < least) { least = loss; gone = i; }
    });
    corners.splice(gone, 1);
  }
  return corners.length === 4 ? corners : null;
}

function refine(pixels: Pixels, quad: readonly Point[], cell: number): Point[] {
  const sides = quad.map((a, i) => fitEdge(pixels, a, quad[(i + 1) % 4], 2 * cell));
  return quad.map((corner, i) => {
    const one = sides[(i + 3) % 4], other = sides[i];
    const met = one && other && meetingPlace(one, other);
    return met && Math.hypot(met.x - corner.x, met.y - corner.y) < 4 * cell ? met : corner;
  });
}

/** Along the side's middle nine tenths, where brightness changes most within `reach` to either side. */
function fitEdge(pixels: Pixels, a: Point, b: Point, reach: number): Line | null {
  const length = Math.hypot(b.x - a.x, b.y - a.y), places: Point[] = [];
  if (length < 20) return null;
  const nx = -(b.y - a.y) / length, ny = (b.x - a.x) / length;
  for (let s = 0.05; s <= 0.95; s += 0.01) {
    const x = a.x + s * (b.x - a.x), y = a.y + s * (b.y - a.y);
    let steepest = 0, at = 0;
    for (let d = -reach; d <= reach; d++) {
      const change = Math.abs(brightnessAt(pixels, x + (d + 1) * nx, y + (d + 1) * ny) - brightnessAt(pixels, x + (d - 1) * nx, y + (d - 1) * ny));
      if (change > steepest) { steepest = change; at = d; }
    }
    if (steepest > 8) places.push({ x: x + at * nx, y: y + at * ny });
  }
  return places.length < 20 ? null : fitLine(places);
}

function brightnessAt({ width, height, rgba }: Pixels, x: number, y: number): number {
  const at = 4 * (Math.min(height - 1, Math.max(0, Math.floor(y))) * width + Math.min(width - 1, Math.max(0, Math.floor(x))));
  return luminance(rgba[at], rgba[at + 1], rgba[at + 2]);
}
