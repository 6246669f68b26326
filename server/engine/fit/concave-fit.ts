/**
 * Best place of an artwork in an area that is not convex, at a fixed turn: branch and bound over places, proven to within `gapMm`.
 *
 * 1. The area's hull gives a first bound (an exact linear programme) and two first places: its optimum, and equal margins.
 * 2. From the better one, climb: solve the programme of the pairs of ink and edge nearby, move, and again, in steps that shrink.
 * 3. Squares of places that the hull allows, best bound first: bound = the border at the middle + half the diagonal (the border
 *    changes by no more than the way gone), or the local programme of cell-bound.ts where it is tighter. A square that cannot
 *    beat the best place by gapMm is dropped, another is quartered.
 * 4. Among places as good, walk towards equal margins.
 *
 * Input: prepared artwork, turned; prepared die. Output: place, its border, the proven bound. Lengths mm, die coordinates. The search counts
 * in squares, never in time. Cost: typically 10 to 100 squares of a few dozen field questions each.
 */
import type { Point } from '../geometry/types.ts';
import { borderInArea, inkDistance, turnedInk } from './border-in-area.ts';
import { addConstraint, emptyConstraints, largestBorder, type BorderConstraints } from './border-programme.ts';
import { addHullBounds, addLocalBounds, type Surroundings } from './cell-bound.ts';
import type { ConcaveArea } from './concave-area.ts';
import { nearestOnRing, placeConstraints, placesWithBorder, REACH_MM, type Place } from './convex-fit.ts';
import { ringBox } from '../geometry/ring.ts';
import { pushCell, popCell, type Cell } from './cell-queue.ts';
import type { PreparedArtwork, PreparedDie, TurnedArtwork } from './prepared.ts';

export interface SearchOptions {
  /** Equal margins stand here. */
  target: Point;
  gapMm: number;
  /** A place no better than this need not be found, only ruled out. */
  worthMm: number;
}
export interface SearchResult extends Place { bound: number; squares: number }

/** With rows that are filled anew for each small programme. */
type Search = Surroundings & { rows: BorderConstraints };

/** Places worse by less are as good: a fifth of the gap that is proven. */
const AS_GOOD_MM = 0.002;
/** Stops an endless search on rounding; the bound stays true then, only wider. */
const MOST_SQUARES = 100_000;

export function concaveFit(artwork: PreparedArtwork, turned: TurnedArtwork, die: PreparedDie, area: ConcaveArea, options: SearchOptions): SearchResult {
  const ink = turnedInk(artwork, turned);
  const s: Search = { area, ink, hull: placeConstraints(die.halfPlanes, turned.hull), rows: emptyConstraints(256) };
  const { target } = options;
  const top = largestBorder(s.hull, target.x, target.y, REACH_MM);
  if (top === null) throw new Error('The border programme without limits on the place always has an answer.');

  let best: Place = { ...target, border: borderInArea(area, ink, target.x, target.y) };
  const other = borderInArea(area, ink, top.x, top.y, best.border);
  if (other > best.border) best = { x: top.x, y: top.y, border: other };
  if (top.border > best.border + options.gapMm) best = climb(s, best);
  const search = searchSquares(s, best, top.border, options);
  const place = search.place.border > options.worthMm ? centred(s, search.place, target) : search.place;
  return { ...place, bound: Math.max(search.bound, place.border), squares: search.squares };
}

const CLIMB_START_MM = 1;
const CLIMB_END_MM = 0.002;
/** Least gain, as a share of the step, for another step of the same length. */
const WORTH_A_STEP = 0.05;

function climb(s: Search, from: Place): Place {
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

function cleared(rows: BorderConstraints): BorderConstraints {
  rows.count = 0;
  return rows;
}

function addSquare(rows: BorderConstraints, x: number, y: number, half: number): void {
  addConstraint(rows, 1, 0, 0, x + half);
  addConstraint(rows, -1, 0, 0, half - x);
  addConstraint(rows, 0, 1, 0, y + half);
  addConstraint(rows, 0, -1, 0, half - y);
}

function searchSquares(s: Search, start: Place, topBound: number, { gapMm, worthMm }: SearchOptions): { place: Place; bound: number; squares: number } {
  let best = start;
  let squares = 0;
  // What was dropped may still be better by up to the gap.
  let dropped = -Infinity;
  const enough = (): number => Math.max(best.border, worthMm) + gapMm;
  const queue: Cell[] = [];

  const look = (x: number, y: number, half: number, parentBound: number): void => {
    squares++;
    const r = half * Math.SQRT2;
    const border = borderInArea(s.area, s.ink, x, y, enough() - r);
    let bound = Math.min(parentBound, border + r, swallowedBound(s, x, y, r));
    if (border > best.border) best = { x, y, border };
    if (bound > enough()) {
      const rows = cleared(s.rows);
      addHullOrPairs(s, x, y, border, r, rows);
      addSquare(rows, x, y, half);
      const inside = largestBorder(rows, x, y, half);
      if (inside === null) return;
      bound = Math.min(bound, inside.border);
      if (bound > enough()) {
        const there = borderInArea(s.area, s.ink, inside.x, inside.y, best.border);
        if (there > best.border) best = { x: inside.x, y: inside.y, border: there };
      }
    }
    if (bound <= enough()) dropped = Math.max(dropped, bound);
    else pushCell(queue, { x, y, half, bound });
  };

  if (topBound > enough()) {
    for (const cell of firstSquares(s, Math.max(best.border, worthMm))) look(cell.x, cell.y, cell.half, topBound);
  } else dropped = topBound;

  for (let cell = popCell(queue); cell !== undefined; cell = popCell(queue)) {
    // The queue's first has the largest bound of all that is left.
    if (cell.bound <= enough() || squares >= MOST_SQUARES) { dropped = Math.max(dropped, cell.bound); break; }
    const half = cell.half / 2;
    for (const [dx, dy] of QUARTERS) look(cell.x + dx * half, cell.y + dy * half, half, cell.bound);
  }
  return { place: best, bound: Math.min(topBound, Math.max(best.border, dropped)), squares };
}
const QUARTERS = [[-1, -1], [1, -1], [-1, 1], [1, 1]] as const;

/** A pole that stays in ink wherever in the square the place is keeps the border at its depth: a plate over a window. */
function swallowedBound({ area, ink }: Search, x: number, y: number, r: number): number {
  let bound = Infinity;
  for (const pole of area.poles) if (-pole.depthMm < bound && inkDistance(ink, pole.x - x, pole.y - y) >= r) bound = -pole.depthMm;
  return bound;
}

/** Far from the optimum, in large squares, only the hull is worth its rows. */
function addHullOrPairs(s: Search, x: number, y: number, border: number, r: number, rows: BorderConstraints): void {
  if (r < border / 5) { addLocalBounds(s, x, y, border, r, rows, false); return; }
  addHullBounds(s.hull, x, y, border + 2 * r, rows);
  addConstraint(rows, 0, 0, 1, border + r);
}

/** Squares over the box of the places that the hull allows. */
function firstSquares(s: Search, border: number): { x: number; y: number; half: number }[] {
  const ring = placesWithBorder(s.hull, border, 0, 0, REACH_MM);
  if (ring.length === 0) return [];
  const box = ringBox(ring);
  // Narrow boxes are cut into at most this many squares along their length.
  const side = Math.max(Math.min(box.w, box.h), Math.max(box.w, box.h) / 8, 1e-6);
  const nx = Math.max(1, Math.ceil(box.w / side)), ny = Math.max(1, Math.ceil(box.h / side));
  const squares = [];
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) squares.push({ x: box.x + ((i + 0.5) * box.w) / nx, y: box.y + ((j + 0.5) * box.h) / ny, half: side / 2 });
  }
  return squares;
}

const WALK_START_MM = 1;
const WALK_END_MM = 0.01;

/** Towards equal margins as far as the border stays as good: each step goes to the nearest place that the pairs nearby allow. */
function centred(s: Search, best: Place, target: Point): Place {
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
