/**
 * Lines become kinds of places: lines whose stamps and ink are the same share one place on the bed.
 *
 * A line that must not turn fixes the turn of its first stamp; one that may turn takes any. Lines of which two must not turn, and
 * not alike, cannot share. Output: kinds in the order of their first line, each with the turns worth trying and its shapes.
 */
import { growConvex } from '../geometry/convex.ts';
import { ringBox, signedArea } from '../geometry/ring.ts';
import type { Box, Ring } from '../geometry/types.ts';
import { clearanceOf, placeShape, sameInk } from './place-geometry.ts';
import type { OrderShapes, PlaceShape } from './place-geometry.ts';
import type { RunLine } from './types.ts';

export interface Kind {
  index: number;
  lines: RunLine[];
  /** How many of each stamp one place needs. */
  stamps: Map<string, number>;
  /** Most places at once, by stamps owned. */
  copies: number;
  poses: Pose[];
  /** Labels wanted, all lines together. */
  demand: number;
}

/** A kind with its first stamp at one turn. */
export interface Pose {
  kind: Kind;
  /** Unique in the order, for caches. */
  id: number;
  shape: PlaceShape;
  /** Boxes relative to the place. */
  labelBox: Box;
  inkBox: Box;
  /** Of the hull of its largest label: more than a sheet's area is never on it. */
  leastAreaMm2: number;
  /** Hulls with few corners that hold the true ones: what the search moves about. */
  labels: Ring[];
  bodies: { hull: Ring; trimMm: number }[];
  ink: Ring;
}

/** Label angles that are tried where a label may turn: others gain nothing between straight sheet edges and cost a search each. */
const LABEL_ANGLES = [0, 90, 180, 270];

export const wanted = (line: RunLine): number => line.quantity + line.overs;

export function makeKinds(shapes: OrderShapes, lines: readonly RunLine[]): Kind[] {
  const groups: RunLine[][] = [];
  for (const line of lines) {
    const group = groups.find((some) => sameInk(shapes, some[0], line) && some.every((other) => turnsAgree(other, line)));
    if (group) group.push(line);
    else groups.push([line]);
  }
  let poseId = 0;
  return groups.map((group, index) => {
    const kind: Kind = { index, lines: group, stamps: countStamps(group[0]), copies: 1, poses: [], demand: group.reduce((n, line) => n + wanted(line), 0) };
    kind.copies = Math.min(...[...kind.stamps].map(([id, n]) => Math.floor(shapes.stamp(id).owned / n)));
    kind.poses = distinctPoses(rotationsOf(group).map((rotationDeg) => makePose(shapes, kind, rotationDeg, poseId++)));
    return kind;
  });
}

export function makePose(shapes: OrderShapes, kind: Kind, rotationDeg: number, id: number): Pose {
  const shape = placeShape(shapes, kind.lines, rotationDeg);
  return {
    kind, id, shape, labelBox: unionBox(shape.labels), inkBox: ringBox(shape.ink), leastAreaMm2: Math.max(...shape.labels.map(signedArea)), labels: shape.labels.map((hull) => fewCorners(hull, LABEL_DIRECTIONS)),
    bodies: shape.bodies.map(({ hull, trimMm }) => ({ hull: fewCorners(hull, BODY_DIRECTIONS), trimMm })), ink: fewCorners(shape.ink, BODY_DIRECTIONS),
  };
}

function turnsAgree(a: RunLine, b: RunLine): boolean {
  return a.mayTurn || b.mayTurn || (a.pieces[0].rotationDeg - b.pieces[0].rotationDeg) % 360 === 0;
}

function rotationsOf(lines: readonly RunLine[]): number[] {
  const fixed = lines.find((line) => !line.mayTurn);
  if (fixed) return [fixed.pieces[0].rotationDeg];
  return LABEL_ANGLES.map((angle) => lines[0].pieces[0].rotationDeg + angle);
}

/** A shape that looks the same at another turn is tried once: a plain rectangle needs no half turn. */
function distinctPoses(poses: Pose[]): Pose[] {
  return poses.filter((pose, i) => !poses.slice(0, i).some((other) => sameRings(pose.shape.labels, other.shape.labels) && sameRings(pose.shape.bodies.map((b) => b.hull), other.shape.bodies.map((b) => b.hull))));
}

const SAME_MM = 1e-6;

function sameRings(a: Ring[], b: Ring[]): boolean {
  return a.every((ring, i) => ring.length === b[i].length && ring.every((p) => b[i].some((q) => Math.abs(p.x - q.x) < SAME_MM && Math.abs(p.y - q.y) < SAME_MM)));
}

function countStamps(line: RunLine): Map<string, number> {
  const counts = new Map<string, number>();
  for (const { stampId } of line.pieces) counts.set(stampId, (counts.get(stampId) ?? 0) + 1);
  return counts;
}

function unionBox(rings: readonly Ring[]): Box {
  return ringBox(rings.flat());
}

/**
 * Directions of a hull with few corners: with 48 a circle of 40 mm across gains 0.04 mm, and sums of two have no more corners. Lettering
 * is seldom what decides, so that its hulls do with fewer.
 */
const LABEL_DIRECTIONS = 48, BODY_DIRECTIONS = 16;
/** Directions whose cosine is nearer to 1 than this are one. */
const SAME_DIRECTION = 1e-10;
/** Edges longer than this share of the way round keep their own direction. */
const LONG_EDGE_SHARE = 0.06;

/** The smallest ring around the hull with edges in the common directions and along its own long edges. Exact for rectangles. */
export function fewCorners(hull: Ring, directions: number): Ring {
  if (hull.length <= 8) return hull;
  const normals: { x: number; y: number }[] = Array.from({ length: directions }, (_, i) => ({ x: Math.cos((i * 2 * Math.PI) / directions), y: Math.sin((i * 2 * Math.PI) / directions) }));
  let round = 0;
  const edges = hull.map((a, i) => {
    const b = hull[(i + 1) % hull.length];
    const length = Math.hypot(b.x - a.x, b.y - a.y);
    round += length;
    return { x: (b.y - a.y) / length, y: -(b.x - a.x) / length, length };
  });
  normals.push(...edges.filter((edge) => edge.length > LONG_EDGE_SHARE * round));
  normals.sort((a, b) => Math.atan2(a.y, a.x) - Math.atan2(b.y, b.x));
  // Round the circle: the first and the last can be one direction as well (π and −π).
  const distinct = normals.filter((n, i) => { const before = normals[(i + normals.length - 1) % normals.length]; return n.x * before.x + n.y * before.y < 1 - SAME_DIRECTION; });
  const support = distinct.map((n) => hull.reduce((far, p) => Math.max(far, p.x * n.x + p.y * n.y), -Infinity));
  const ring: Ring = [];
  distinct.forEach((n, i) => {
    const k = (i + 1) % distinct.length, m = distinct[k];
    const det = n.x * m.y - n.y * m.x;
    const p = { x: (support[i] * m.y - support[k] * n.y) / det, y: (n.x * support[k] - m.x * support[i]) / det };
    const last = ring[ring.length - 1];
    if (!last || Math.hypot(last.x - p.x, last.y - p.y) > 1e-7) ring.push(p);
  });
  return ring.length < hull.length ? ring : growConvex(hull, 0);
}

/** Least distance that the ink of two kinds keeps on the lid; 0 where both use one ink. */
export function kindClearance(shapes: OrderShapes, a: Kind, b: Kind): number {
  return clearanceOf(shapes, a.lines, b.lines);
}
