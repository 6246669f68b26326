/**
 * Branch and bound over the places, and the turns in an interval, of an artwork in an area that is not convex.
 *
 * A cell is a square of places of the artwork's pivot (the middle of the circle round its ink) and an interval of turns. From its middle no ink
 * moves farther than r + g within it: r half of the square's diagonal, g = 2·swing·sin(half interval / 2). So the border is nowhere in it above
 *   - the border at its middle + r + g (the border changes by no more than the way gone),
 *   - the local programme of cell-bound.ts for the square at the middle turn, + g,
 *   - minus the depth of a pole that stays in ink.
 * Cells that cannot beat the best place by the gap are dropped; of others the larger loss, of place or of turn, is halved. Best bound
 * first. Nothing is mutated but what createPoses remembers; the result does not depend on it.
 */
import { ringBox } from '../geometry/ring.ts';
import { rotatePoint } from '../geometry/transform.ts';
import type { Point } from '../geometry/types.ts';
import { borderInArea, inkDistance, turnedInk } from './border-in-area.ts';
import { addConstraint, emptyConstraints, largestBorder, type BorderConstraints } from './border-programme.ts';
import { addHullBounds, addLocalBounds, type Surroundings } from './cell-bound.ts';
import { popCell, pushCell, type Cell } from './cell-queue.ts';
import type { ConcaveArea } from './concave-area.ts';
import { placeConstraints, placesWithBorder, REACH_MM, type Place } from './convex-fit.ts';
import { turnArtwork, type PreparedArtwork, type PreparedDie, type TurnedArtwork } from './prepared.ts';

/** The artwork at one turn. */
export interface Pose extends Surroundings {
  turned: TurnedArtwork;
  /** From the centre of the artwork's box. */
  pivot: Point;
  /** Filled anew for each small programme. */
  rows: BorderConstraints;
}
export interface Poses { at(angleDeg: number): Pose; swingMm: number }

/** Poses of a long search over turns take room: they are forgotten all at once. */
const REMEMBERED_POSES = 64;

export function createPoses(artwork: PreparedArtwork, die: PreparedDie, area: ConcaveArea): Poses {
  const rows = emptyConstraints(256);
  const known = new Map<number, Pose>();
  return {
    swingMm: artwork.swingMm,
    at(angleDeg) {
      const kept = known.get(angleDeg);
      if (kept) return kept;
      const turned = turnArtwork(artwork, angleDeg);
      const pose = { turned, area, rows, ink: turnedInk(artwork, turned), hull: placeConstraints(die.halfPlanes, turned.hull), pivot: rotatePoint(artwork.pivot, angleDeg) };
      if (known.size >= REMEMBERED_POSES) known.clear();
      known.set(angleDeg, pose);
      return pose;
    },
  };
}

export interface CellSearch {
  turnDeg: number;
  tiltDeg: number;
  /** Known from elsewhere to hold for all cells. */
  topBound: number;
  /** At turnDeg. */
  start: Place;
  gapMm: number;
  /** A place no better than this need not be found, only ruled out. */
  worthMm: number;
  /** Nor one that is not better than this. */
  leastMm: number;
}
/** Of places, the centre of the artwork's box. */
export interface CellSearchResult extends Place { angleDeg: number; bound: number; cells: number }

/** Stops an endless search on rounding; the bound stays true then, only wider. */
const MOST_CELLS = 300_000;

export function searchCells(poses: Poses, { turnDeg, tiltDeg, topBound, start, gapMm, worthMm, leastMm }: CellSearch): CellSearchResult {
  let best = { x: start.x, y: start.y, border: start.border, angleDeg: turnDeg };
  let cells = 0;
  // What was dropped may still be better by up to the gap.
  let dropped = -Infinity;
  const enough = (): number => Math.max(best.border, worthMm) + gapMm;
  const offer = (x: number, y: number, border: number, angleDeg: number): void => {
    if (border > best.border && border > leastMm) best = { x, y, border, angleDeg };
  };
  const queue: Cell[] = [];

  const look = (cell: Cell): void => {
    cells++;
    const s = poses.at(cell.angleDeg);
    const x = cell.x - s.pivot.x, y = cell.y - s.pivot.y;
    const r = cell.half * Math.SQRT2, g = turnGain(poses, cell.halfDeg);
    // Below both, no more need be known: the cell is dropped and its middle no better.
    const border = borderInArea(s.area, s.ink, x, y, Math.min(best.border, enough() - r - g));
    offer(x, y, border, cell.angleDeg);
    cell.bound = Math.min(cell.bound, border + r + g, swallowedBound(s, x, y, r + g));
    cell.splitTurn = g > r;
    if (cell.bound > enough()) {
      const rows = cleared(s.rows);
      addHullOrPairs(s, x, y, border, r, rows);
      addSquare(rows, x, y, cell.half);
      const inside = largestBorder(rows, x, y, cell.half);
      if (inside === null) return;
      cell.bound = Math.min(cell.bound, inside.border + g);
      if (cell.bound > enough()) {
        const there = borderInArea(s.area, s.ink, inside.x, inside.y, best.border);
        offer(inside.x, inside.y, there, cell.angleDeg);
        // What the programme lost against its own optimum is the places' share.
        if (g > 0) cell.splitTurn = g > inside.border - Math.max(there, border);
      }
    }
    if (cell.bound <= enough()) dropped = Math.max(dropped, cell.bound);
    else pushCell(queue, cell);
  };

  if (topBound <= enough()) dropped = topBound;
  else firstCells(poses, turnDeg, tiltDeg, Math.max(best.border, worthMm), topBound).forEach(look);
  for (let cell = popCell(queue); cell !== undefined; cell = popCell(queue)) {
    // The queue's first has the largest bound of all that is left.
    if (cell.bound <= enough() || cells >= MOST_CELLS) { dropped = Math.max(dropped, cell.bound); break; }
    partsOf(cell).forEach(look);
  }
  return { ...best, bound: Math.min(topBound, Math.max(best.border, dropped)), cells };
}

/** How far a turn by half the interval moves the ink that swings farthest. */
function turnGain(poses: Poses, halfDeg: number): number {
  return 2 * poses.swingMm * Math.sin((Math.min(halfDeg, 180) * Math.PI) / 360);
}

const QUARTERS = [[-1, -1], [1, -1], [-1, 1], [1, 1]] as const;

function partsOf(cell: Cell): Cell[] {
  if (cell.splitTurn) return [-1, 1].map((side) => ({ ...cell, angleDeg: cell.angleDeg + (side * cell.halfDeg) / 2, halfDeg: cell.halfDeg / 2 }));
  const half = cell.half / 2;
  return QUARTERS.map(([dx, dy]) => ({ ...cell, x: cell.x + dx * half, y: cell.y + dy * half, half }));
}

/** Squares over the box of the pivot's places that the hull allows at some turn of the interval. */
function firstCells(poses: Poses, turnDeg: number, tiltDeg: number, border: number, bound: number): Cell[] {
  const s = poses.at(turnDeg);
  const ring = placesWithBorder(s.hull, border - turnGain(poses, tiltDeg), 0, 0, REACH_MM);
  if (ring.length === 0) return [];
  const box = ringBox(ring);
  // Narrow boxes are cut into at most eight squares along their length.
  const side = Math.max(Math.min(box.w, box.h), Math.max(box.w, box.h) / 8, 1e-6);
  const nx = Math.max(1, Math.ceil(box.w / side)), ny = Math.max(1, Math.ceil(box.h / side));
  const cells: Cell[] = [];
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const x = box.x + ((i + 0.5) * box.w) / nx + s.pivot.x, y = box.y + ((j + 0.5) * box.h) / ny + s.pivot.y;
      cells.push({ x, y, half: side / 2, angleDeg: turnDeg, halfDeg: tiltDeg, bound, splitTurn: false });
    }
  }
  return cells;
}

/** A pole that stays in ink wherever in the cell the artwork is keeps the border at its depth: a plate over a window. */
function swallowedBound({ area, ink }: Pose, x: number, y: number, reach: number): number {
  let bound = Infinity;
  for (const pole of area.poles) if (-pole.depthMm < bound && inkDistance(ink, pole.x - x, pole.y - y) >= reach) bound = -pole.depthMm;
  return bound;
}

/** Pairs are worth their rows in squares this much smaller than the border; in larger ones only the hull is. */
const SMALL_SQUARE_SHARE = 0.2;
/** At least, where ink is outside: its rows hold in wider squares, too. */
const SMALL_SQUARE_MM = 1.5;

function addHullOrPairs(s: Pose, x: number, y: number, border: number, r: number, rows: BorderConstraints): void {
  if (r < Math.max(Math.abs(border) * SMALL_SQUARE_SHARE, border > 0 ? 0 : SMALL_SQUARE_MM)) { addLocalBounds(s, x, y, border, r, rows, false); return; }
  addHullBounds(s.hull, x, y, border + 2 * r, rows);
  addConstraint(rows, 0, 0, 1, border + r);
}

export function cleared(rows: BorderConstraints): BorderConstraints {
  rows.count = 0;
  return rows;
}

export function addSquare(rows: BorderConstraints, x: number, y: number, half: number): void {
  addConstraint(rows, 1, 0, 0, x + half);
  addConstraint(rows, -1, 0, 0, half - x);
  addConstraint(rows, 0, 1, 0, y + half);
  addConstraint(rows, 0, -1, 0, half - y);
}
