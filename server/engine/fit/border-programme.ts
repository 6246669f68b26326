/**
 * The small linear programme of fitting: the place (x, y) where the border b is largest, under constraints
 *
 *     nx·x + ny·y + k·b ≤ s      with k = 1 (an edge keeps the ink b away) or k = 0 (a limit on the place alone).
 *
 * Input: the constraints, and a square round (x0, y0) outside which no place is looked for. Output: the exact optimum and the
 * three constraints that meet in it. Dual simplex (C. E. Lemke, "The dual method of solving the linear programming problem",
 * Naval Research Logistics Quarterly 1, 1954): three constraints that bound b from above are held, the most violated
 * one enters until none is violated. Every vertex is solved anew from the input, so no rounding builds up.
 * Cost: O(m) a step, about ten to thirty steps. At least one constraint with k = 1 is needed; without one b is unbounded: throws.
 */

/** Rows of nx, ny, k, s, one after the other: read millions of times in a fit table. */
export interface BorderConstraints { rows: Float64Array; count: number }

export interface BorderOptimum { x: number; y: number; border: number }

/** A constraint violated by less is met: a hundred thousand times finer than a die can show, and far above rounding. */
const VIOLATION_MM = 1e-10;
/** Below this an entering constraint does not lean on a held one. */
const PIVOT_EPS = 1e-12;
/** Steps without gain, from constraints that meet in one point, before taking Bland's rule (smallest index), which cannot cycle. */
const STALLED_STEPS = 12;

const ROW = 4;

export function emptyConstraints(capacity: number): BorderConstraints {
  return { rows: new Float64Array(Math.max(1, capacity) * ROW), count: 0 };
}

export function addConstraint(c: BorderConstraints, nx: number, ny: number, k: 0 | 1, s: number): void {
  if ((c.count + 1) * ROW > c.rows.length) {
    const grown = new Float64Array(c.rows.length * 2);
    grown.set(c.rows);
    c.rows = grown;
  }
  const at = c.count * ROW;
  c.rows[at] = nx;
  c.rows[at + 1] = ny;
  c.rows[at + 2] = k;
  c.rows[at + 3] = s;
  c.count++;
}

/** Held constraints as flat 3 × 4, and their multipliers. */
interface Basis { rows: Float64Array; lambda: Float64Array; index: Int32Array }

/**
 * `reach` is half of the square's side. Constraints with k = 0 may make the programme infeasible; then null.
 */
export function largestBorder(c: BorderConstraints, x0: number, y0: number, reach: number): BorderOptimum | null {
  const basis = firstBasis(c, x0, y0, reach);
  const vertex = new Float64Array(3), mu = new Float64Array(3);
  let stalled = 0;
  // Each basis is met at most once, and there are far fewer good ones than this; the limit only guards against rounding.
  for (let step = 0; step < 200 + 4 * c.count; step++) {
    solveVertex(basis.rows, vertex);
    const entering = stalled < STALLED_STEPS ? mostViolated(c, vertex) : firstViolated(c, vertex);
    if (entering < 0) return { x: vertex[0], y: vertex[1], border: vertex[2] };
    const at = entering * ROW;
    solveMultipliers(basis.rows, c.rows[at], c.rows[at + 1], c.rows[at + 2], mu);
    const leaving = leavingRow(basis, mu, stalled >= STALLED_STEPS);
    if (leaving < 0) return null;
    const gain = basis.lambda[leaving] / mu[leaving];
    stalled = gain > PIVOT_EPS ? 0 : stalled + 1;
    for (let j = 0; j < 3; j++) basis.lambda[j] = Math.max(0, basis.lambda[j] - gain * mu[j]);
    basis.lambda[leaving] = gain;
    basis.index[leaving] = entering;
    basis.rows.set(c.rows.subarray(at, at + ROW), leaving * ROW);
  }
  // Rounding kept two near-equal vertices apart: the last one is right to within it.
  solveVertex(basis.rows, vertex);
  return { x: vertex[0], y: vertex[1], border: vertex[2] - Math.max(0, violationOf(c, mostViolated(c, vertex), vertex)) };
}

/** One border constraint and the two sides of the square that stop the place from running away along it. */
function firstBasis(c: BorderConstraints, x0: number, y0: number, reach: number): Basis {
  let first = 0;
  while (first < c.count && c.rows[first * ROW + 2] !== 1) first++;
  if (first === c.count) throw new RangeError('A border that nothing limits was asked for.');
  const nx = c.rows[first * ROW], ny = c.rows[first * ROW + 1];
  const sx = nx > 0 ? -1 : 1, sy = ny > 0 ? -1 : 1;
  return {
    rows: Float64Array.of(nx, ny, 1, c.rows[first * ROW + 3], sx, 0, 0, sx * x0 + reach, 0, sy, 0, sy * y0 + reach),
    lambda: Float64Array.of(1, Math.abs(nx), Math.abs(ny)),
    index: Int32Array.of(first, -1, -2),
  };
}

function violationOf(c: BorderConstraints, i: number, v: Float64Array): number {
  return i < 0 ? 0 : c.rows[i * ROW] * v[0] + c.rows[i * ROW + 1] * v[1] + c.rows[i * ROW + 2] * v[2] - c.rows[i * ROW + 3];
}

function mostViolated(c: BorderConstraints, v: Float64Array): number {
  let worst = VIOLATION_MM, at = -1;
  const rows = c.rows, end = c.count * ROW, x = v[0], y = v[1], b = v[2];
  for (let i = 0; i < end; i += ROW) {
    const over = rows[i] * x + rows[i + 1] * y + rows[i + 2] * b - rows[i + 3];
    if (over > worst) { worst = over; at = i; }
  }
  return at < 0 ? -1 : at / ROW;
}

function firstViolated(c: BorderConstraints, v: Float64Array): number {
  for (let i = 0; i < c.count; i++) if (violationOf(c, i, v) > VIOLATION_MM) return i;
  return -1;
}

/** Ratio test; of equal ratios the strongest pivot, or under Bland's rule the smallest index. */
function leavingRow(basis: Basis, mu: Float64Array, bland: boolean): number {
  let best = -1;
  for (let j = 0; j < 3; j++) {
    if (mu[j] <= PIVOT_EPS) continue;
    if (best < 0) { best = j; continue; }
    const a = basis.lambda[j] / mu[j], b = basis.lambda[best] / mu[best];
    if (a < b || (a === b && (bland ? basis.index[j] < basis.index[best] : mu[j] > mu[best]))) best = j;
  }
  return best;
}

/** The point where the three held constraints are equations: Cramer's rule. */
function solveVertex(r: Float64Array, out: Float64Array): void {
  const [a, b, c, s, d, e, f, t, g, h, i, u] = r;
  const det = a * (e * i - f * h) - b * (d * i - f * g) + c * (d * h - e * g);
  out[0] = (s * (e * i - f * h) - b * (t * i - f * u) + c * (t * h - e * u)) / det;
  out[1] = (a * (t * i - f * u) - s * (d * i - f * g) + c * (d * u - t * g)) / det;
  out[2] = (a * (e * u - t * h) - b * (d * u - t * g) + s * (d * h - e * g)) / det;
}

/** Multipliers with which the held normals add up to (nx, ny, k). */
function solveMultipliers(r: Float64Array, nx: number, ny: number, k: number, out: Float64Array): void {
  const a = r[0], b = r[1], c = r[2], d = r[4], e = r[5], f = r[6], g = r[8], h = r[9], i = r[10];
  const det = a * (e * i - f * h) - b * (d * i - f * g) + c * (d * h - e * g);
  out[0] = (nx * (e * i - f * h) - ny * (d * i - f * g) + k * (d * h - e * g)) / det;
  out[1] = (a * (ny * i - k * h) - b * (nx * i - k * g) + c * (nx * h - ny * g)) / det;
  out[2] = (a * (e * k - f * ny) - b * (d * k - f * nx) + c * (d * ny - e * nx)) / det;
}
