/**
 * Path data, basic shapes and transforms of SVG 2 (W3C, chapters 8 to 10) as rings of points in mm. Input: attribute texts and the matrix
 * from user units to mm; output: rings, each with whether it is closed. Curves are off by at most TOLERANCE_MM after the matrix.
 * Every number is checked, every point counted against the file's budget; what is wrong throws SvgImportError.
 */
import { arcStepDeg } from '../geometry/arc.ts';
import type { Point, Ring } from '../geometry/types.ts';

export type SvgImportCode =
  | 'too-large' | 'not-xml' | 'not-svg' | 'doctype' | 'script' | 'event-handler' | 'outside-reference' | 'foreign-content'
  | 'too-many-points' | 'too-many-elements' | 'too-deep' | 'bad-number' | 'bad-path' | 'bad-transform' | 'bad-length' | 'out-of-range' | 'no-outlines';

/** A file that is not taken; the message is for the person who chose it. */
export class SvgImportError extends Error {
  readonly code: SvgImportCode;
  constructor(code: SvgImportCode, message: string) {
    super(message);
    this.name = 'SvgImportError';
    this.code = code;
  }
}

/** x' = a·x + c·y + e, y' = b·x + d·y + f. */
export type Matrix = readonly [a: number, b: number, c: number, d: number, e: number, f: number];
export const IDENTITY: Matrix = [1, 0, 0, 1, 0, 0];

export interface DrawnRing { ring: Ring; closed: boolean }
export interface PointBudget { left: number }

/** Half of what a cut line may be off. */
const TOLERANCE_MM = 0.01;
/** Ten metres: a drawing that reaches farther has its units wrong, and its figures no meaning. */
const FARTHEST_MM = 10_000;

export function multiplied([a, b, c, d, e, f]: Matrix, n: Matrix): Matrix {
  return [a * n[0] + c * n[1], b * n[0] + d * n[1], a * n[2] + c * n[3], b * n[2] + d * n[3], a * n[4] + c * n[5] + e, b * n[4] + d * n[5] + f];
}

function applied([a, b, c, d, e, f]: Matrix, p: Point): Point {
  return { x: a * p.x + c * p.y + e, y: b * p.x + d * p.y + f };
}

/** No vector grows by more: the Frobenius norm bounds the largest singular value. */
function scaleOf([a, b, c, d]: Matrix): number {
  return Math.hypot(a, b, c, d);
}

export function parseTransform(text: string): Matrix {
  let matrix = IDENTITY, rest = text.trim();
  while (rest !== '') {
    const match = /^([a-zA-Z]+)\s*\(([^)]*)\)[\s,]*/.exec(rest);
    if (!match) throw new SvgImportError('bad-transform', `The transform “${text.slice(0, 60)}” cannot be read.`);
    matrix = multiplied(matrix, oneTransform(match[1], numbersIn(match[2])));
    rest = rest.slice(match[0].length);
  }
  return matrix;
}

function oneTransform(name: string, v: number[]): Matrix {
  const rad = (deg: number): number => (deg * Math.PI) / 180;
  if (name === 'matrix' && v.length === 6) return [v[0], v[1], v[2], v[3], v[4], v[5]];
  if (name === 'translate' && v.length >= 1 && v.length <= 2) return [1, 0, 0, 1, v[0], v[1] ?? 0];
  if (name === 'scale' && v.length >= 1 && v.length <= 2) return [v[0], 0, 0, v[1] ?? v[0], 0, 0];
  if (name === 'skewX' && v.length === 1) return [1, 0, Math.tan(rad(v[0])), 1, 0, 0];
  if (name === 'skewY' && v.length === 1) return [1, Math.tan(rad(v[0])), 0, 1, 0, 0];
  if (name === 'rotate' && (v.length === 1 || v.length === 3)) {
    const sin = Math.sin(rad(v[0])), cos = Math.cos(rad(v[0])), [x, y] = [v[1] ?? 0, v[2] ?? 0];
    return [cos, sin, -sin, cos, x - cos * x + sin * y, y - sin * x - cos * y];
  }
  throw new SvgImportError('bad-transform', `The transform “${name}” with ${v.length} numbers is not known.`);
}

const NUMBER = /[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?/y;

export function numbersIn(text: string): number[] {
  const scan = new Scanner(text);
  const numbers: number[] = [];
  while (!scan.atEnd()) numbers.push(scan.number());
  return numbers;
}

/** Reads numbers, flags and letters as the path grammar has them: separators are optional wherever the next sign is clear. */
class Scanner {
  private readonly text: string;
  private at = 0;
  constructor(text: string) { this.text = text; }

  atEnd(): boolean {
    while (this.at < this.text.length && /[\s,]/.test(this.text[this.at])) this.at++;
    return this.at >= this.text.length;
  }
  letter(): string | null {
    if (this.atEnd() || !/[a-zA-Z]/.test(this.text[this.at])) return null;
    return this.text[this.at++];
  }
  number(): number {
    if (this.atEnd()) throw new SvgImportError('bad-path', 'A number is missing at the end of a path.');
    NUMBER.lastIndex = this.at;
    const match = NUMBER.exec(this.text);
    if (!match) throw new SvgImportError('bad-number', `“${this.text.slice(this.at, this.at + 12)}” in the drawing is not a number.`);
    this.at += match[0].length;
    const value = Number(match[0]);
    if (!Number.isFinite(value)) throw new SvgImportError('bad-number', `“${match[0]}” in the drawing is too large a number.`);
    return value;
  }
  flag(): boolean {
    if (this.atEnd() || !/[01]/.test(this.text[this.at])) throw new SvgImportError('bad-path', 'An arc in a path has a flag that is neither 0 nor 1.');
    return this.text[this.at++] === '1';
  }
}

/** Collects points in mm. */
class Pen {
  readonly drawn: DrawnRing[] = [];
  private ring: Ring | null = null;
  private readonly matrix: Matrix;
  private readonly budget: PointBudget;
  constructor(matrix: Matrix, budget: PointBudget) {
    this.matrix = matrix;
    this.budget = budget;
  }
  toMm(p: Point): Point {
    const mm = applied(this.matrix, p);
    if (!(Math.abs(mm.x) <= FARTHEST_MM && Math.abs(mm.y) <= FARTHEST_MM)) throw new SvgImportError('out-of-range', 'The drawing reaches farther than 10 m: its units or its transforms are wrong.');
    return mm;
  }
  move(p: Point): void {
    this.finish(false);
    this.ring = [];
    this.add(this.toMm(p));
  }
  add(mm: Point): void {
    if (--this.budget.left < 0) throw new SvgImportError('too-many-points', 'The drawing has more points than a die can have. Simplify its outlines and try again.');
    this.ring?.push(mm);
  }
  line(p: Point): void {
    this.add(this.toMm(p));
  }
  /** A Bézier curve of degree 2 or 3; steps after G. Wang, "The subdivision method for finding the intersection of two Bézier curves" (1984). */
  curve(controls: Point[]): void {
    const c = controls.map((p) => this.toMm(p));
    const degree = c.length - 1;
    let bend = 0;
    for (let i = 0; i + 2 < c.length; i++) bend = Math.max(bend, Math.hypot(c[i].x - 2 * c[i + 1].x + c[i + 2].x, c[i].y - 2 * c[i + 1].y + c[i + 2].y));
    const steps = Math.max(1, Math.ceil(Math.sqrt((degree * (degree - 1) * bend) / (8 * TOLERANCE_MM))));
    for (let i = 1; i <= steps; i++) this.add(bezierAt(c, i / steps));
  }
  /** Elliptical arc in centre form; phi turns its axes. */
  arc(centre: Point, rx: number, ry: number, phi: number, from: number, sweep: number): void {
    const step = (arcStepDeg(Math.max(rx, ry) * scaleOf(this.matrix), TOLERANCE_MM) * Math.PI) / 180;
    const steps = Math.max(1, Math.ceil(Math.abs(sweep) / step - 1e-9));
    for (let i = 1; i <= steps; i++) {
      const t = from + (sweep * i) / steps, x = rx * Math.cos(t), y = ry * Math.sin(t);
      this.line({ x: centre.x + Math.cos(phi) * x - Math.sin(phi) * y, y: centre.y + Math.sin(phi) * x + Math.cos(phi) * y });
    }
  }
  finish(closed: boolean): void {
    if (this.ring !== null && this.ring.length > 1) this.drawn.push({ ring: this.ring, closed });
    this.ring = null;
  }
}

function bezierAt(controls: readonly Point[], t: number): Point {
  let level = [...controls];
  while (level.length > 1) level = level.slice(1).map((p, i) => ({ x: level[i].x + (p.x - level[i].x) * t, y: level[i].y + (p.y - level[i].y) * t }));
  return level[0];
}

export function pathRings(data: string, matrix: Matrix, budget: PointBudget): DrawnRing[] {
  if (!/^[\s,]*([mM]|$)/.test(data)) throw new SvgImportError('bad-path', 'A path does not begin with a move.');
  const scan = new Scanner(data), pen = new Pen(matrix, budget);
  let here: Point = { x: 0, y: 0 }, start = here, command = '';
  // Control points that S and T mirror; only right after a curve of the same kind.
  let cubic: Point | null = null, quadratic: Point | null = null;
  let penDown = false;
  while (!scan.atEnd()) {
    const letter = scan.letter();
    if (letter !== null) command = letter;
    else if (command === '' || command === 'Z' || command === 'z') throw new SvgImportError('bad-path', 'A path has numbers where a command is needed.');
    const relative = command === command.toLowerCase(), name = command.toUpperCase();
    const origin = here;
    const point = (): Point => {
      const x = scan.number(), y = scan.number();
      return relative ? { x: origin.x + x, y: origin.y + y } : { x, y };
    };
    const down = (): void => {
      // After Z the next part starts where the closed one did.
      if (!penDown) pen.move(start);
      penDown = true;
    };
    let nextCubic: Point | null = null, nextQuadratic: Point | null = null;
    if (name === 'M') {
      here = start = point();
      pen.move(start);
      penDown = true;
      command = relative ? 'l' : 'L'; // further pairs are lines
    } else if (name === 'Z') {
      pen.finish(true);
      penDown = false;
      here = start;
    } else if (name === 'L' || name === 'H' || name === 'V') {
      down();
      if (name === 'L') here = point();
      else if (name === 'H') here = { x: scan.number() + (relative ? origin.x : 0), y: origin.y };
      else here = { x: origin.x, y: scan.number() + (relative ? origin.y : 0) };
      pen.line(here);
    } else if (name === 'C' || name === 'S') {
      down();
      const first: Point = name === 'C' ? point() : mirrored(cubic, origin);
      nextCubic = point();
      here = point();
      pen.curve([origin, first, nextCubic, here]);
    } else if (name === 'Q' || name === 'T') {
      down();
      nextQuadratic = name === 'Q' ? point() : mirrored(quadratic, origin);
      here = point();
      pen.curve([origin, nextQuadratic, here]);
    } else if (name === 'A') {
      down();
      const rx = scan.number(), ry = scan.number(), turnDeg = scan.number(), large = scan.flag(), clockwise = scan.flag();
      here = point();
      endpointArc(pen, origin, here, Math.abs(rx), Math.abs(ry), turnDeg, large, clockwise);
    } else throw new SvgImportError('bad-path', `“${command}” is not a command of a path.`);
    cubic = nextCubic;
    quadratic = nextQuadratic;
  }
  pen.finish(false);
  return pen.drawn;
}

function mirrored(control: Point | null, about: Point): Point {
  return control === null ? about : { x: 2 * about.x - control.x, y: 2 * about.y - control.y };
}

/** From the ends to the centre: SVG 2, appendix B.2.4, with radii too small made just large enough (B.2.5). */
function endpointArc(pen: Pen, from: Point, to: Point, rx: number, ry: number, turnDeg: number, large: boolean, clockwise: boolean): void {
  if (from.x === to.x && from.y === to.y) return;
  if (rx === 0 || ry === 0) { pen.line(to); return; }
  const phi = (turnDeg * Math.PI) / 180, cos = Math.cos(phi), sin = Math.sin(phi);
  const dx = (from.x - to.x) / 2, dy = (from.y - to.y) / 2;
  const x1 = cos * dx + sin * dy, y1 = cos * dy - sin * dx;
  const short = Math.sqrt((x1 / rx) ** 2 + (y1 / ry) ** 2);
  const grow = Math.max(1, short), a = rx * grow, b = ry * grow;
  const rest = Math.max(0, 1 / ((x1 / a) ** 2 + (y1 / b) ** 2) - 1);
  const factor = Math.sqrt(rest) * (large === clockwise ? -1 : 1);
  const cx = (factor * a * y1) / b, cy = (-factor * b * x1) / a;
  const centre = { x: cos * cx - sin * cy + (from.x + to.x) / 2, y: sin * cx + cos * cy + (from.y + to.y) / 2 };
  const start = Math.atan2((y1 - cy) / b, (x1 - cx) / a), end = Math.atan2((-y1 - cy) / b, (-x1 - cx) / a);
  let sweep = end - start;
  if (clockwise && sweep < 0) sweep += 2 * Math.PI;
  if (!clockwise && sweep > 0) sweep -= 2 * Math.PI;
  pen.arc(centre, a, b, phi, start, sweep);
}

export function polygonRings(points: string, closed: boolean, matrix: Matrix, budget: PointBudget): DrawnRing[] {
  const v = numbersIn(points), pen = new Pen(matrix, budget);
  // A last odd number is no point (SVG 2, 10.6).
  for (let i = 0; i + 1 < v.length; i += 2) {
    if (i === 0) pen.move({ x: v[0], y: v[1] });
    else pen.line({ x: v[i], y: v[i + 1] });
  }
  pen.finish(closed);
  return pen.drawn;
}

export function ellipseRings(cx: number, cy: number, rx: number, ry: number, matrix: Matrix, budget: PointBudget): DrawnRing[] {
  if (!(rx > 0 && ry > 0)) return [];
  const pen = new Pen(matrix, budget);
  pen.move({ x: cx + rx, y: cy });
  pen.arc({ x: cx, y: cy }, rx, ry, 0, 0, 2 * Math.PI);
  pen.finish(true);
  return pen.drawn;
}

export function rectangleRings(x: number, y: number, w: number, h: number, rx: number, ry: number, matrix: Matrix, budget: PointBudget): DrawnRing[] {
  if (!(w > 0 && h > 0)) return [];
  const a = Math.min(rx, w / 2), b = Math.min(ry, h / 2), pen = new Pen(matrix, budget);
  pen.move({ x: x + a, y });
  for (const [cornerX, cornerY, from, toX, toY] of [
    [x + w - a, y + b, -Math.PI / 2, x + w - a, y], [x + w - a, y + h - b, 0, x + w, y + h - b],
    [x + a, y + h - b, Math.PI / 2, x + a, y + h], [x + a, y + b, Math.PI, x, y + b],
  ]) {
    pen.line({ x: toX, y: toY });
    if (a > 0 && b > 0) pen.arc({ x: cornerX, y: cornerY }, a, b, 0, from, Math.PI / 2);
  }
  pen.finish(true);
  return pen.drawn;
}
