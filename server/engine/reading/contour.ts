/**
 * Outline of a connected piece of ink with sub-pixel places: marching squares (W. Lorensen, H. Cline, 1987, in the plane) on a field given at
 * the pixels' middles, walked along the cracks between ink and paper.
 *
 * Pixel (i, j) covers [i, i+1) × [j, j+1) and its value stands at its middle. Between an ink pixel and a paper pixel beside it the edge lies
 * where the field, taken as linear, is zero: half way where both are equally far from it, so that one pixel of hard ink has a box of 1 × 1.
 * Where two straight edges along the pixels' axes meet, the corner between them is added, which the squares alone would cut off.
 * Ink touching at corners is one piece. Rings run with ink to the right: outer rings clockwise as seen on the page, holes the other way.
 * One point per crack; nothing is mutated. Cost: linear in the length of the outline.
 */
import type { Outline, Ring } from '../geometry/types.ts';
import type { Component } from './components.ts';
import { fieldAt, type InkMask } from './ink-mask.ts';

/** Directions of travel: right, down, left, up. */
const STEP_X = [1, 0, -1, 0], STEP_Y = [0, 1, 0, -1];
/** Pixel to the right and to the left hand ahead of a lattice corner, for each direction. */
const RIGHT_X = [0, -1, -1, 0], RIGHT_Y = [0, 0, -1, -1];
const LEFT_X = [0, 0, -1, -1], LEFT_Y = [-1, 0, 0, -1];
const UP = 3;

export function traceContours(mask: InkMask, piece: Component): Outline {
  const visited = new Set<number>();
  const rings: Ring[] = [];
  for (let i = 0; i < piece.runStarts.length; i += 2) {
    const y = piece.runStarts[i], x = piece.runStarts[i + 1];
    if (!visited.has(y * mask.width + x)) rings.push(walk(mask, x, y, visited));
  }
  return { rings };
}

/** From the left-hand crack of a run's first pixel, upwards, back to it. */
function walk(mask: InkMask, startX: number, startY: number, visited: Set<number>): Ring {
  const { width, height, ink } = mask;
  const inked = (x: number, y: number) => x >= 0 && y >= 0 && x < width && y < height && ink[y * width + x] === 1;
  const ring: Ring = [], directions: number[] = [];
  let cornerX = startX, cornerY = startY + 1, direction = UP;
  do {
    const x = cornerX + RIGHT_X[direction], y = cornerY + RIGHT_Y[direction];
    if (direction === UP) visited.add(y * width + x);
    ring.push(crossing(mask, x, y, cornerX + LEFT_X[direction], cornerY + LEFT_Y[direction]));
    directions.push(direction);
    cornerX += STEP_X[direction];
    cornerY += STEP_Y[direction];
    if (inked(cornerX + LEFT_X[direction], cornerY + LEFT_Y[direction])) direction = (direction + 3) % 4;
    else if (!inked(cornerX + RIGHT_X[direction], cornerY + RIGHT_Y[direction])) direction = (direction + 1) % 4;
  } while (cornerX !== startX || cornerY !== startY + 1 || direction !== UP);
  return withCorners(ring, directions);
}

/** Edges off a straight line by more than this, px, between two cracks are bent. */
const STRAIGHT_PX = 0.1;

function withCorners(ring: Ring, directions: readonly number[]): Ring {
  const n = ring.length, sharp: Ring = [];
  for (let i = 0; i < n; i++) {
    const before = (i + n - 1) % n, next = (i + 1) % n, after = (i + 2) % n;
    sharp.push(ring[i]);
    const turns = directions[i] !== directions[next] && directions[before] === directions[i] && directions[next] === directions[after];
    if (!turns) continue;
    const across = directions[i] % 2 === 0;
    const bent = across ? Math.max(Math.abs(ring[i].y - ring[before].y), Math.abs(ring[next].x - ring[after].x)) : Math.max(Math.abs(ring[i].x - ring[before].x), Math.abs(ring[next].y - ring[after].y));
    if (bent < STRAIGHT_PX) sharp.push(across ? { x: ring[next].x, y: ring[i].y } : { x: ring[i].x, y: ring[next].y });
  }
  return sharp;
}

/** Where the field is zero between the middles of an ink pixel and the paper pixel beside it. */
function crossing(mask: InkMask, inkX: number, inkY: number, paperX: number, paperY: number): { x: number; y: number } {
  const inside = fieldAt(mask, inkX, inkY);
  const beyond = paperX >= 0 && paperY >= 0 && paperX < mask.width && paperY < mask.height;
  // Beyond the picture nothing is known: the edge of the pixel is the edge of the ink.
  const outside = beyond ? fieldAt(mask, paperX, paperY) : -inside;
  const t = inside - outside > 0 ? inside / (inside - outside) : 0.5;
  return { x: inkX + 0.5 + t * (paperX - inkX), y: inkY + 0.5 + t * (paperY - inkY) };
}
