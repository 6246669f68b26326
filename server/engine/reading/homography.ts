/**
 * Perspective between two planes as a 3 × 3 matrix, row by row: (x, y) goes to ((m0 x + m1 y + m2) / w, (m3 x + m4 y + m5) / w) with
 * w = m6 x + m7 y + m8. Straight lines stay straight, so outlines may be mapped corner by corner.
 *
 * `homographyFrom` takes four or more pairs, no three of four on a line, and solves the direct linear transformation by least squares on
 * normalised points (R. Hartley, A. Zisserman, "Multiple View Geometry", 2nd ed., §4.1, §4.4.4); null where the places do not allow it.
 * Nothing is mutated.
 */
import type { Point } from '../geometry/types.ts';

export type Homography = [number, number, number, number, number, number, number, number, number];

export function applyHomography(m: Readonly<Homography>, p: Point): Point {
  const w = m[6] * p.x + m[7] * p.y + m[8];
  return { x: (m[0] * p.x + m[1] * p.y + m[2]) / w, y: (m[3] * p.x + m[4] * p.y + m[5]) / w };
}

export function scaling(x: number, y: number): Homography {
  return [x, 0, 0, 0, y, 0, 0, 0, 1];
}

/** First b, then a. */
export function multiply(a: Readonly<Homography>, b: Readonly<Homography>): Homography {
  const product: number[] = [];
  for (let r = 0; r < 9; r += 3) for (let c = 0; c < 3; c++) product.push(a[r] * b[c] + a[r + 1] * b[3 + c] + a[r + 2] * b[6 + c]);
  return product as Homography;
}

export function invertHomography(m: Readonly<Homography>): Homography {
  const [a, b, c, d, e, f, g, h, i] = m;
  return normalised([e * i - f * h, c * h - b * i, b * f - c * e, f * g - d * i, a * i - c * g, c * d - a * f, d * h - e * g, b * g - a * h, a * e - b * d]);
}

/** How much lengths grow at a place, all directions taken together: the root of the local growth of areas. */
export function localScale(m: Readonly<Homography>, p: Point): number {
  // Exact for the plain scale of a scan, where the root of the square would leave 1e-17 behind.
  if (m[1] === 0 && m[3] === 0 && m[6] === 0 && m[7] === 0 && m[0] === m[4]) return Math.abs(m[0] / m[8]);
  const w = m[6] * p.x + m[7] * p.y + m[8];
  const determinant = m[0] * (m[4] * m[8] - m[5] * m[7]) - m[1] * (m[3] * m[8] - m[5] * m[6]) + m[2] * (m[3] * m[7] - m[4] * m[6]);
  return Math.sqrt(Math.abs(determinant / w ** 3));
}

export function homographyFrom(from: readonly Point[], to: readonly Point[]): Homography | null {
  const a = normalising(from), b = normalising(to);
  // Normal equations for the eight free entries; the ninth is 1 in normalised places, whose middle is far from the horizon.
  const rows = Array.from({ length: 8 }, () => new Float64Array(9));
  from.forEach((p, i) => {
    const { x, y } = applyHomography(a, p), { x: u, y: v } = applyHomography(b, to[i]);
    addEquation(rows, [x, y, 1, 0, 0, 0, -u * x, -u * y, u]);
    addEquation(rows, [0, 0, 0, x, y, 1, -v * x, -v * y, v]);
  });
  const solution = solve(rows);
  return solution && normalised(multiply(invertHomography(b), multiply([...solution, 1] as unknown as Homography, a)));
}

function addEquation(rows: Float64Array[], equation: readonly number[]): void {
  for (let r = 0; r < 8; r++) for (let c = 0; c < 9; c++) rows[r][c] += equation[r] * equation[c];
}

/** Gaussian elimination with pivots; null where the matrix is singular. */
function solve(rows: Float64Array[]): number[] | null {
  const n = rows.length;
  for (let c = 0; c < n; c++) {
    let pivot = c;
    for (let r = c + 1; r < n; r++) if (Math.abs(rows[r][c]) > Math.abs(rows[pivot][c])) pivot = r;
    if (!(Math.abs(rows[pivot][c]) > SINGULAR)) return null;
    [rows[c], rows[pivot]] = [rows[pivot], rows[c]];
    for (let r = 0; r < n; r++) {
      if (r === c) continue;
      const factor = rows[r][c] / rows[c][c];
      for (let k = c; k <= n; k++) rows[r][k] -= factor * rows[c][k];
    }
  }
  return rows.map((row, r) => row[n] / row[r]);
}
/** Of normalised places, whose squares are about 1: smaller pivots mean that three of four places are on a line. */
const SINGULAR = 1e-9;

/** Moves the places' middle to 0 and their mean distance from it to √2. */
function normalising(points: readonly Point[]): Homography {
  const cx = mean(points.map((p) => p.x)), cy = mean(points.map((p) => p.y));
  const spread = mean(points.map((p) => Math.hypot(p.x - cx, p.y - cy))) || 1;
  const s = Math.SQRT2 / spread;
  return [s, 0, -s * cx, 0, s, -s * cy, 0, 0, 1];
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, v) => sum + v, 0) / values.length;
}

function normalised(m: number[]): Homography {
  return m.map((v) => v / m[8]) as Homography;
}
