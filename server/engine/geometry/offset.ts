/**
 * Growing and shrinking of filled outlines, and tidying of rings that cross, by clipper2-ts (Vatti clipping; offsets after
 * A. Johnson). Input and output in mm; nothing is mutated.
 *
 * An outline shrunk by d is all points at least d from its edge: inner corners become arcs of radius d, outer ones stay
 * sharp; it can fall into several rings, or into none. Grown, it is all points within d: outer corners become arcs. Arcs are
 * points on the true arc, their chords off by at most ARC_TOLERANCE_MM. Convex rings are shrunk exactly, half-plane by half-plane.
 * Cost: O(n log n) for n points without crossings; O(n²) for convex rings, which are short.
 */
import { Clipper, EndType, FillRule, JoinType, type Path64, type Paths64 } from 'clipper2-ts';
import { ARC_TOLERANCE_MM } from './arc.ts';
import { signedArea } from './ring.ts';
import type { Outline, Point, Ring } from './types.ts';

/**
 * Clipper counts in whole numbers: 10 nm each, far below what a die can show. A sheet of a metre is 1e8 of them, whose products
 * just stay in the 53 bits of a double.
 */
const UNITS_PER_MM = 1e5;
/** Points that lie this near to a straight line are left out: with the arcs' own 0.01 mm still well within 0.02 mm. */
const THINNING_MM = 0.003;
/** Not used by round joins, but asked for. */
const MITRE_LIMIT = 2;
/** A corner that turns back by less than this, in mm² of its parallelogram, is flat: rounding of straight sides. */
const FLAT_MM2 = 1e-9;

/** Outer rings clockwise as seen on the page, holes the other way; rings that cross or repeat are resolved even-odd. */
export function tidyOutline(outline: Outline): Outline {
  return fromPaths(Clipper.union(toPaths(outline), FillRule.EvenOdd));
}

export function insetOutline(outline: Outline, insetMm: number): Outline {
  checkDistance(insetMm);
  if (insetMm === 0) return outline;
  if (outline.rings.length === 1 && isConvexRing(outline.rings[0])) {
    const ring = insetConvexRing(outline.rings[0], insetMm);
    return { rings: ring.length < 3 ? [] : [ring] };
  }
  return offset(outline, -insetMm);
}

export function growOutline(outline: Outline, growMm: number): Outline {
  checkDistance(growMm);
  return growMm === 0 ? outline : offset(outline, growMm);
}

function checkDistance(mm: number): void {
  if (!(mm >= 0 && Number.isFinite(mm))) throw new RangeError(`An offset is a length of 0 or more, not ${mm}.`);
}

function offset(outline: Outline, deltaMm: number): Outline {
  const tidy = Clipper.union(toPaths(outline), FillRule.EvenOdd);
  // Clipper asks for a tolerance well below the radius.
  const toleranceMm = Math.min(ARC_TOLERANCE_MM, Math.abs(deltaMm) / 4);
  const grown = Clipper.inflatePaths(tidy, deltaMm * UNITS_PER_MM, JoinType.Round, EndType.Polygon, MITRE_LIMIT, toleranceMm * UNITS_PER_MM);
  // An arc that was already drawn as chords comes back with two points at each of its corners.
  return fromPaths(Clipper.ramerDouglasPeuckerPaths(grown, THINNING_MM * UNITS_PER_MM));
}

function toPaths(outline: Outline): Paths64 {
  return outline.rings.map((ring): Path64 => ring.map((p) => ({ x: Math.round(p.x * UNITS_PER_MM), y: Math.round(p.y * UNITS_PER_MM), z: 0 })));
}

function fromPaths(paths: Paths64): Outline {
  const rings = paths.map((path): Ring => path.map((p) => ({ x: p.x / UNITS_PER_MM, y: p.y / UNITS_PER_MM })));
  return { rings: rings.filter((ring) => ring.length >= 3 && Math.abs(signedArea(ring)) > FLAT_MM2) };
}

/** Turns one way only, once round. Either winding; straight corners count as convex. */
export function isConvexRing(ring: Ring): boolean {
  if (ring.length < 3) return false;
  const sense = Math.sign(signedArea(ring));
  let turned = 0;
  for (let i = 0; i < ring.length; i++) {
    const a = ring[i], b = ring[(i + 1) % ring.length], c = ring[(i + 2) % ring.length];
    const ux = b.x - a.x, uy = b.y - a.y, vx = c.x - b.x, vy = c.y - b.y;
    const cross = ux * vy - uy * vx;
    if (cross * sense < -FLAT_MM2) return false;
    turned += Math.atan2(cross, ux * vx + uy * vy);
  }
  // A pentagram also turns one way only, but twice round.
  return sense !== 0 && Math.abs(Math.abs(turned) - 2 * Math.PI) < 1e-3;
}

function insetConvexRing(ring: Ring, insetMm: number): Ring {
  const clockwise = signedArea(ring) > 0 ? ring : [...ring].reverse();
  let left: Ring = clockwise;
  for (let i = 0; i < clockwise.length && left.length > 0; i++) {
    const a = clockwise[i], b = clockwise[(i + 1) % clockwise.length];
    const length = Math.hypot(b.x - a.x, b.y - a.y);
    if (length === 0) continue;
    const nx = (b.y - a.y) / length, ny = -(b.x - a.x) / length;
    left = clipToHalfPlane(left, nx, ny, nx * a.x + ny * a.y - insetMm);
  }
  return left.length >= 3 && Math.abs(signedArea(left)) > FLAT_MM2 ? left : [];
}

/** The part of a convex ring where nx·x + ny·y ≤ limit. */
export function clipToHalfPlane(ring: readonly Point[], nx: number, ny: number, limit: number): Ring {
  const kept: Ring = [];
  for (let i = 0; i < ring.length; i++) {
    const p = ring[i], q = ring[(i + 1) % ring.length];
    const dp = nx * p.x + ny * p.y - limit, dq = nx * q.x + ny * q.y - limit;
    if (dp <= 0) kept.push(p);
    if ((dp < 0 && dq > 0) || (dp > 0 && dq < 0)) {
      const t = dp / (dp - dq);
      kept.push({ x: p.x + (q.x - p.x) * t, y: p.y + (q.y - p.y) * t });
    }
  }
  return kept;
}
