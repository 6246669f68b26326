/**
 * Best place, and tilt, of an artwork in an area that is not convex: proven to within the gap asked for.
 *
 * 1. At the turn itself, the area's hull gives a first bound (an exact linear programme) and two first places: its optimum, and equal margins.
 * 2. From the better one, climb: solve the programme of the pairs of ink and edge nearby, move, and again, in steps that shrink.
 * 3. Branch and bound from there (concave-search.ts), over places; then, where a tilt is allowed, over places and turns together.
 * 4. Among places as good, walk towards equal margins.
 *
 * Input: prepared artwork and die. Output: place, turn, border, the proven bound. Lengths mm, die coordinates. The search counts in cells,
 * never in time. Cost: typically 10 to 100 cells of a few dozen field questions each at a fixed turn, some thousand with a tilt.
 */
import type { Point } from '../geometry/types.ts';
import { borderInArea } from './border-in-area.ts';
import { largestBorder } from './border-programme.ts';
import { addLocalBounds } from './cell-bound.ts';
import type { ConcaveArea } from './concave-area.ts';
import { addSquare, cleared, createPoses, searchCells, type Pose } from './concave-search.ts';
import { nearestOnRing, placesWithBorder, REACH_MM, type Place } from './convex-fit.ts';
import { centredTarget, type PreparedArtwork, type PreparedDie, type TurnedArtwork } from './prepared.ts';

export interface ConcaveFitOptions {
  turnDeg: number;
  tiltDeg: number;
  /** A place no better than this need not be found, only ruled out. */
  worthMm: number;
}
export interface ConcaveFitResult extends Place { artwork: TurnedArtwork; bound: number; cells: number }

/** The proof's gap at a fixed turn; with a tilt it holds against the upright artwork as well as against the best tilt. */
const GAP_MM = 0.01;
const TILT_GAP_MM = 0.012;
/** A tilt that gains less is not worth its looks, and may be no gain at all in a round label drawn as chords. Below the gap. */
const WORTH_TILTING_MM = 0.008;
/** Places worse by less are as good: a fifth of the gap that is proven. */
const AS_GOOD_MM = 0.002;

export function concaveFit(artwork: PreparedArtwork, die: PreparedDie, area: ConcaveArea, options: ConcaveFitOptions): ConcaveFitResult {
  const { turnDeg, tiltDeg, worthMm } = options;
  const poses = createPoses(artwork, die, area);
  const pose = poses.at(turnDeg), target = centredTarget(die, pose.turned);
  const top = largestBorder(pose.hull, target.x, target.y, REACH_MM);
  if (top === null) throw new Error('The border programme without limits on the place always has an answer.');

  let first: Place = { ...target, border: borderInArea(area, pose.ink, target.x, target.y) };
  const other = borderInArea(area, pose.ink, top.x, top.y, first.border);
  if (other > first.border) first = { x: top.x, y: top.y, border: other };
  if (top.border > first.border + GAP_MM) first = climb(pose, first);
  const upright = searchCells(poses, { turnDeg, tiltDeg: 0, topBound: top.border, start: first, gapMm: GAP_MM, worthMm, leastMm: -Infinity });
  if (tiltDeg === 0) return settled(die, pose, upright, worthMm, upright.bound, upright.cells);

  const leastMm = upright.border + WORTH_TILTING_MM;
  const tilted = searchCells(poses, { turnDeg, tiltDeg, topBound: Infinity, start: upright, gapMm: TILT_GAP_MM, worthMm, leastMm });
  const cells = upright.cells + tilted.cells;
  if (tilted.angleDeg === turnDeg) return settled(die, pose, upright, worthMm, Math.max(tilted.bound, upright.border), cells);
  const steady = steadied((angleDeg) => poses.at(angleDeg), tilted, turnDeg, tiltDeg);
  return settled(die, poses.at(steady.angleDeg), steady, worthMm, tilted.bound, cells);
}

function settled(die: PreparedDie, pose: Pose, place: Place, worthMm: number, bound: number, cells: number): ConcaveFitResult {
  const { x, y, border } = place.border > worthMm ? centred(pose, place, centredTarget(die, pose.turned)) : place;
  return { x, y, border, artwork: pose.turned, bound: Math.max(bound, border), cells };
}

const STEADY_START_DEG = 0.25;
const STEADY_END_DEG = 0.002;

/** The last hundredths of a tilt, by steps to either side that are halved. */
function steadied(poseAt: (angleDeg: number) => Pose, from: Place & { angleDeg: number }, turnDeg: number, tiltDeg: number): Place & { angleDeg: number } {
  let best = from;
  for (let step = STEADY_START_DEG; step > STEADY_END_DEG;) {
    const better = [-step, step].map((by) => {
      const angleDeg = Math.max(turnDeg - tiltDeg, Math.min(turnDeg + tiltDeg, best.angleDeg + by)), pose = poseAt(angleDeg);
      return { ...climb(pose, { x: best.x, y: best.y, border: borderInArea(pose.area, pose.ink, best.x, best.y) }), angleDeg };
    }).find((place) => place.border > best.border + 1e-4);
    if (better) best = better;
    else step /= 2;
  }
  return best;
}

const CLIMB_START_MM = 1;
const CLIMB_END_MM = 0.002;
/** Least gain, as a share of the step, for another step of the same length. */
const WORTH_A_STEP = 0.05;

function climb(s: Pose, from: Place): Place {
  let best = from;
  for (let r = CLIMB_START_MM; r > CLIMB_END_MM;) {
    const rows = cleared(s.rows);
    addLocalBounds(s, best.x, best.y, best.border, r, rows, true);
    addSquare(rows, best.x, best.y, r);
    const next = largestBorder(rows, best.x, best.y, r);
    const border = next === null ? -Infinity : borderInArea(s.area, s.ink, next.x, next.y, best.border);
    const gain = border - best.border;
    if (next !== null && gain > 0) best = { x: next.x, y: next.y, border };
    // Zigzags gain less and less without an end; a shorter step gets over them.
    if (!(gain > r * WORTH_A_STEP)) r /= 4;
  }
  return best;
}

const WALK_START_MM = 1;
const WALK_END_MM = 0.01;

/** Towards equal margins as far as the border stays as good: each step goes to the nearest place that the pairs nearby allow. */
function centred(s: Pose, best: Place, target: Point): Place {
  const enough = best.border - AS_GOOD_MM;
  const atTarget = borderInArea(s.area, s.ink, target.x, target.y, enough);
  if (atTarget >= enough) return { ...target, border: atTarget };
  let here = best;
  for (let r = WALK_START_MM; r > WALK_END_MM;) {
    const rows = cleared(s.rows);
    addLocalBounds(s, here.x, here.y, here.border, r, rows, true);
    const next = nearestOnRing(placesWithBorder(rows, enough, here.x, here.y, r), target);
    const nearer = next !== null && Math.hypot(next.x - target.x, next.y - target.y) < Math.hypot(here.x - target.x, here.y - target.y) - WALK_END_MM / 4;
    const border = nearer ? borderInArea(s.area, s.ink, next.x, next.y, enough) : -Infinity;
    if (next !== null && border >= enough) {
      here = { ...next, border };
      r *= 2;
    } else r /= 4;
  }
  return here;
}
