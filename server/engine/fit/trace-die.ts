/**
 * A clean cut line from the outline of a scanned label. Input: the outline in mm as read from a picture, with the ripple of its pixels
 * and specks of dust; output: one outer ring and its true holes, starting at 0, 0, with what was done to it. Nothing is mutated.
 *
 * The ring is walked in even steps. Corners (where the direction over CORNER_ARM_MM to either side turns sharply) stay where they are;
 * between them the line is smoothed by G. Taubin's two alternating passes ("A signal processing approach to fair surface design",
 * SIGGRAPH 1995), which flatten ripples without shrinking the shape, and then thinned. Cost O(n) a pass.
 */
import { Clipper } from 'clipper2-ts';
import { outlineBox, signedArea } from '../geometry/ring.ts';
import { translateOutline } from '../geometry/transform.ts';
import type { Outline, Point, Ring } from '../geometry/types.ts';
import { outlineFault } from './outline-check.ts';

export interface TraceOptions {
  /** Keep holes, as of a tag; default true. Those under 2 mm across are dust. */
  holes?: boolean;
  /** How long a ripple may be to be smoothed away; default 1 mm. 0 leaves the line as it is. */
  smoothMm?: number;
}
export interface TracedDie {
  outline: Outline;
  widthMm: number;
  heightMm: number;
  /** Farthest that the line was moved. */
  movedMm: number;
  /** In words, where the outline cannot be a die. */
  problem: string | null;
}

const DEFAULT_SMOOTH_MM = 1;
/** Steps along the ring; well below any detail of a cut line. */
const STEP_MM = 0.2;
const CORNER_ARM_MM = 1.2;
/** A turn by more over both arms is a corner, by less a curve: an arc of 3 mm radius turns by 23° there. */
const CORNER_DEG = 38;
/** π · 1 mm²: a punched hole is larger, a scratch or a speck smaller. */
const SMALLEST_HOLE_MM2 = 3.1;
/** Thinned points lie off the smoothed line by at most this. */
const THINNING_MM = 0.01;
/** Taubin's passes: the second undoes the shrinking of the first; pass band 1/λ + 1/μ = 0.1. */
const SHRINK = 0.5;
const SWELL = -1 / (1 / 0.5 - 0.1);

export function traceDie(outline: Outline, options: TraceOptions = {}): TracedDie {
  const smoothMm = options.smoothMm ?? DEFAULT_SMOOTH_MM;
  const outer = outline.rings.reduce<Ring | null>((most, ring) => (most === null || Math.abs(signedArea(ring)) > Math.abs(signedArea(most)) ? ring : most), null);
  if (outer === null) throw new RangeError('A traced outline needs at least one ring.');
  const holes = options.holes === false ? [] : outline.rings.filter((ring) => ring !== outer && Math.abs(signedArea(ring)) >= SMALLEST_HOLE_MM2);
  const smoothed = [outer, ...holes].map((ring) => (smoothMm > 0 ? smoothRing(ring, smoothMm) : { ring, movedMm: 0 }));
  const drawn: Outline = { rings: smoothed.map((s) => s.ring) };
  const box = outlineBox(drawn);
  return {
    outline: translateOutline(drawn, -box.x, -box.y), widthMm: box.w, heightMm: box.h,
    movedMm: Math.max(...smoothed.map((s) => s.movedMm)), problem: outlineFault(drawn),
  };
}

function smoothRing(ring: Ring, smoothMm: number): { ring: Ring; movedMm: number } {
  const even = evenSteps(ring);
  if (even.length < 8) return { ring, movedMm: 0 };
  const corner = cornerFlags(even);
  let line = even;
  // Each pair of passes averages over about one step more; ripples of smoothMm are gone after its square.
  const pairs = Math.max(2, Math.round((smoothMm / STEP_MM) ** 2));
  for (let i = 0; i < pairs; i++) line = pass(pass(line, corner, SHRINK), corner, SWELL);
  const movedMm = line.reduce((most, p, i) => Math.max(most, Math.hypot(p.x - even[i].x, p.y - even[i].y)), 0);
  // Start at a corner where there is one, so that thinning keeps it.
  const first = Math.max(0, corner.indexOf(1));
  return { ring: thinned([...line.slice(first), ...line.slice(0, first)]), movedMm };
}

function evenSteps(ring: Ring): Ring {
  const lengths = ring.map((a, i) => Math.hypot(ring[(i + 1) % ring.length].x - a.x, ring[(i + 1) % ring.length].y - a.y));
  const total = lengths.reduce((sum, length) => sum + length, 0);
  const count = Math.max(3, Math.round(total / STEP_MM));
  const even: Ring = [];
  for (let k = 0, i = 0, gone = 0; k < count; k++) {
    const wanted = (total * k) / count;
    while (i < ring.length - 1 && gone + lengths[i] < wanted) gone += lengths[i++];
    const t = lengths[i] === 0 ? 0 : Math.min(1, (wanted - gone) / lengths[i]);
    const a = ring[i], b = ring[(i + 1) % ring.length];
    even.push({ x: a.x + (b.x - a.x) * t, y: a.y + (b.y - a.y) * t });
  }
  return even;
}

/** 1 where the line turns sharply, once for each corner: at its sharpest place. */
function cornerFlags(line: Ring): Uint8Array {
  const n = line.length, arm = Math.min(Math.floor(n / 4), Math.round(CORNER_ARM_MM / STEP_MM));
  const turnDeg = Float64Array.from(line, (p, i) => {
    const before = line[(i + n - arm) % n], after = line[(i + arm) % n];
    const ux = p.x - before.x, uy = p.y - before.y, vx = after.x - p.x, vy = after.y - p.y;
    return (Math.abs(Math.atan2(ux * vy - uy * vx, ux * vx + uy * vy)) * 180) / Math.PI;
  });
  return Uint8Array.from(line, (_, i) => {
    if (turnDeg[i] < CORNER_DEG) return 0;
    for (let k = 1; k <= arm; k++) if (turnDeg[(i + k) % n] > turnDeg[i] || turnDeg[(i + n - k) % n] >= turnDeg[i]) return 0;
    return 1;
  });
}

function pass(line: Ring, corner: Uint8Array, share: number): Ring {
  const n = line.length;
  return line.map((p, i): Point => {
    if (corner[i]) return p;
    const a = line[(i + n - 1) % n], b = line[(i + 1) % n];
    return { x: p.x + share * ((a.x + b.x) / 2 - p.x), y: p.y + share * ((a.y + b.y) / 2 - p.y) };
  });
}

function thinned(ring: Ring): Ring {
  // Douglas and Peucker work on open lines: the first point is repeated and taken away again.
  const open = Clipper.ramerDouglasPeuckerD([...ring, ring[0]], THINNING_MM).map((p) => ({ x: p.x, y: p.y }));
  return open.slice(0, -1);
}
