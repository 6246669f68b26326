/**
 * What a group of parts looks like, as far as it tells whether another group belongs to it: where it lies, how tall its letters are, how thick
 * its strokes.
 *
 * Input: parts' outlines in one unit, level; not mutated. Sizes of letters are those of their core, the band in which a line of type has most
 * strokes side by side (x-height for small letters), so that a script word in one piece compares with letters in many.
 * Cost: CORE_LINES passes over the outline.
 */
import { outlineArea, outlineBox } from '../geometry/ring.ts';
import type { Box, Outline } from '../geometry/types.ts';

export interface Cluster {
  box: Box;
  /** Letter height: the median of the parts' core heights, weighed by their ink. */
  core: number;
  /** Typical stroke: twice the ink's area over its outline's length. */
  stroke: number;
  /** Largest gap within. */
  inner: number;
  parts: number;
  /** Of all parts: length of outlines and area, to tell the stroke of several together. */
  length: number;
  area: number;
  /** Each part's core height and ink, in ascending order of height. */
  cores: { core: number; area: number }[];
}

const CORE_LINES = 24;
/** Of a part's lines this share is less busy than the line that stands for its core: not the busiest, which may be a swash. */
const CORE_RANK = 0.75;

export function clusterOf(part: Outline): Cluster {
  const box = outlineBox(part);
  const area = Math.max(outlineArea(part), 1e-9);
  let length = 0;
  for (const ring of part.rings) ring.forEach((p, i) => { const q = ring[(i + 1) % ring.length]; length += Math.hypot(q.x - p.x, q.y - p.y); });
  const core = Math.max(coreHeight(part, box), 1e-6);
  return { box, core, stroke: (2 * area) / length, inner: 0, parts: 1, length, area, cores: [{ core, area }] };
}

export function mergeClusters(a: Cluster, b: Cluster, gap: number): Cluster {
  const cores = [...a.cores, ...b.cores].sort((p, q) => p.core - q.core);
  const length = a.length + b.length, area = a.area + b.area;
  return { box: unionBox(a.box, b.box), core: medianCore(cores, area), stroke: (2 * area) / length, inner: Math.max(a.inner, b.inner, gap), parts: a.parts + b.parts, length, area, cores };
}

function medianCore(cores: Cluster['cores'], area: number): number {
  let sum = 0;
  for (const { core, area: own } of cores) {
    sum += own;
    if (sum >= area / 2) return core;
  }
  return cores[cores.length - 1].core;
}

export function unionBox(a: Box, b: Box): Box {
  const x = Math.min(a.x, b.x), y = Math.min(a.y, b.y);
  return { x, y, w: Math.max(a.x + a.w, b.x + b.w) - x, h: Math.max(a.y + a.h, b.y + b.h) - y };
}

/** Height of the band whose lines cross at least half as many strokes as a busy line does. */
function coreHeight(part: Outline, box: Box): number {
  const crossings = new Float64Array(CORE_LINES), step = box.h / CORE_LINES;
  for (const ring of part.rings) {
    ring.forEach((p, i) => {
      const q = ring[(i + 1) % ring.length];
      const from = Math.ceil((Math.min(p.y, q.y) - box.y) / step - 0.5), to = Math.ceil((Math.max(p.y, q.y) - box.y) / step - 0.5);
      for (let line = Math.max(0, from); line < Math.min(CORE_LINES, to); line++) crossings[line]++;
    });
  }
  const busy = [...crossings].sort((p, q) => p - q)[Math.floor(CORE_RANK * CORE_LINES)];
  let lines = 0;
  for (const c of crossings) if (c >= 0.5 * busy) lines++;
  return lines * step;
}
