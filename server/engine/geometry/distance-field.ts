/**
 * Signed distance from any point to the edge of a filled outline, asked for many times.
 *
 * Input: an outline, filled even-odd, any winding; rings of one or two points are points and strokes. Output: mm, above 0 inside, below 0
 * outside. Exact to rounding: the grid only remembers, for each cell, which edges can be the nearest to some point in it. An edge
 * can be if it is no farther from the cell's middle than the nearest one plus twice the cell's half diagonal (triangle inequality).
 * Cells are filled when first asked, coarse ones from all edges, fine ones from their coarse cell. Cost: a dozen edges a question
 * after that; far away (more than one outline's size from it) all edges. Answers do not depend on what was asked before.
 */
import { outlineBox } from './ring.ts';
import type { Box, Outline } from './types.ts';

/** Coarse cells along the outline's longer side, and the same number again on either side of it. */
const COARSE_ALONG = 8;
const COARSE = 3 * COARSE_ALONG;
/** Cells are halved in two strides, each choosing from the edges of the cell round it: middle cells along a coarse one … */
const MIDDLE = 4;
/** … and fine ones along a coarse one: about 1 mm on a label of 70 mm. */
const FINE = 8;

interface Cell { edges: Int32Array; /** 1 inside, −1 outside, 0 where the edge passes through. */ side: number }

export class DistanceField {
  readonly box: Box;
  /** Edges a → b; dx, dy their vectors, inverse the reciprocal of their squared length (0 for a point). */
  readonly ax: Float64Array;
  readonly ay: Float64Array;
  readonly dx: Float64Array;
  readonly dy: Float64Array;
  /** Of the point that was asked last. */
  nearestEdge = 0;
  private readonly inverse: Float64Array;
  private readonly all: Int32Array;
  private readonly left: number;
  private readonly top: number;
  private readonly coarseMm: number;
  private readonly fineMm: number;
  private readonly coarse: (Int32Array | undefined)[] = new Array<Int32Array | undefined>(COARSE ** 2);
  private readonly middle: (Int32Array | undefined)[] = new Array<Int32Array | undefined>((COARSE * MIDDLE) ** 2);
  /** For each fine cell, its place in `cells` plus 1; 0 while it has not been asked for. */
  private readonly fine = new Int32Array((COARSE * FINE) ** 2);
  private readonly cells: Cell[] = [];
  private readonly rows: (Int32Array | undefined)[] = new Array<Int32Array | undefined>(COARSE * FINE);
  /** Squared distances while a cell is filled. */
  private readonly scratch: Float64Array;

  constructor(outline: Outline) {
    const count = outline.rings.reduce((n, ring) => n + ring.length, 0);
    this.box = outlineBox(outline);
    this.ax = new Float64Array(count);
    this.ay = new Float64Array(count);
    this.dx = new Float64Array(count);
    this.dy = new Float64Array(count);
    this.inverse = new Float64Array(count);
    this.scratch = new Float64Array(count);
    this.all = Int32Array.from({ length: count }, (_, i) => i);
    let at = 0;
    for (const ring of outline.rings) {
      ring.forEach((a, i) => {
        const b = ring[(i + 1) % ring.length];
        const dx = b.x - a.x, dy = b.y - a.y, lengthSq = dx * dx + dy * dy;
        this.ax[at] = a.x;
        this.ay[at] = a.y;
        this.dx[at] = dx;
        this.dy[at] = dy;
        this.inverse[at] = lengthSq > 0 ? 1 / lengthSq : 0;
        at++;
      });
    }
    // A point has no size of its own; any cell will do for it.
    const longer = Math.max(this.box.w, this.box.h) || 1;
    this.coarseMm = longer / COARSE_ALONG;
    this.fineMm = this.coarseMm / FINE;
    this.left = this.box.x + this.box.w / 2 - (COARSE / 2) * this.coarseMm;
    this.top = this.box.y + this.box.h / 2 - (COARSE / 2) * this.coarseMm;
  }

  signed(x: number, y: number): number {
    const cell = this.cellAt(x, y);
    const edges = cell === null ? this.all : cell.edges;
    let least = Infinity;
    for (let k = 0; k < edges.length; k++) {
      const distSq = this.distSq(edges[k], x, y);
      if (distSq < least) { least = distSq; this.nearestEdge = edges[k]; }
    }
    const dist = Math.sqrt(least);
    const inside = cell === null ? false : cell.side !== 0 ? cell.side > 0 : this.contains(x, y);
    return inside ? dist : -dist;
  }

  /** Edges that can be nearest near this point, in no order; all that can be nearest at it are among them. */
  candidates(x: number, y: number): Int32Array {
    const cell = this.cellAt(x, y);
    return cell === null ? this.all : cell.edges;
  }

  /** All edges that can be nearest to some place within r of the point, from the smallest cell that holds them all. */
  candidatesWithin(x: number, y: number, r: number): Int32Array {
    for (const [perCoarse, edgesOf] of this.levels) {
      const sizeMm = this.coarseMm / perCoarse, end = COARSE * perCoarse;
      const i = Math.floor((x - r - this.left) / sizeMm), j = Math.floor((y - r - this.top) / sizeMm);
      if (i < 0 || j < 0 || i >= end || j >= end) continue;
      // Within one cell, whose edges are known.
      if (i === Math.floor((x + r - this.left) / sizeMm) && j === Math.floor((y + r - this.top) / sizeMm)) return edgesOf(i, j);
    }
    return this.all;
  }
  /** From fine to coarse. */
  private readonly levels: readonly (readonly [number, (i: number, j: number) => Int32Array])[] = [
    [FINE, (i, j) => this.cellOf(i, j).edges], [MIDDLE, (i, j) => this.middleEdges(i, j)], [1, (i, j) => this.coarseEdges(i, j)],
  ];

  /** Share of the edge at which its nearest point to (x, y) lies: 0 at a, 1 at b. */
  shareAlong(edge: number, x: number, y: number): number {
    const t = ((x - this.ax[edge]) * this.dx[edge] + (y - this.ay[edge]) * this.dy[edge]) * this.inverse[edge];
    return t < 0 ? 0 : t > 1 ? 1 : t;
  }

  distSq(edge: number, x: number, y: number): number {
    const px = x - this.ax[edge], py = y - this.ay[edge], dx = this.dx[edge], dy = this.dy[edge];
    let t = (px * dx + py * dy) * this.inverse[edge];
    t = t < 0 ? 0 : t > 1 ? 1 : t;
    const ex = px - t * dx, ey = py - t * dy;
    return ex * ex + ey * ey;
  }

  /** Even-odd, over the edges that pass this height. */
  private contains(x: number, y: number): boolean {
    const row = Math.floor((y - this.top) / this.fineMm);
    const edges = (this.rows[row] ??= this.fillRow(row));
    let inside = false;
    for (let k = 0; k < edges.length; k++) {
      const e = edges[k], ay = this.ay[e], by = ay + this.dy[e];
      if (ay > y !== by > y && x < (this.dx[e] * (y - ay)) / this.dy[e] + this.ax[e]) inside = !inside;
    }
    return inside;
  }

  private fillRow(row: number): Int32Array {
    // A hair wider than the row, for points that rounding puts on its edge.
    const from = this.top + row * this.fineMm - this.fineMm * 1e-6, to = from + this.fineMm * (1 + 2e-6);
    return this.all.filter((e) => Math.min(this.ay[e], this.ay[e] + this.dy[e]) <= to && Math.max(this.ay[e], this.ay[e] + this.dy[e]) >= from);
  }

  private cellAt(x: number, y: number): Cell | null {
    const i = Math.floor((x - this.left) / this.fineMm), j = Math.floor((y - this.top) / this.fineMm);
    if (!(i >= 0 && j >= 0 && i < COARSE * FINE && j < COARSE * FINE)) return null;
    return this.cellOf(i, j);
  }

  private cellOf(i: number, j: number): Cell {
    const at = j * COARSE * FINE + i;
    if (this.fine[at] === 0) this.fine[at] = this.cells.push(this.fillFine(i, j));
    return this.cells[this.fine[at] - 1];
  }

  private fillFine(i: number, j: number): Cell {
    const x = this.left + (i + 0.5) * this.fineMm, y = this.top + (j + 0.5) * this.fineMm;
    const stride = FINE / MIDDLE;
    const { edges, dist } = this.nearestIn(this.middleEdges(Math.floor(i / stride), Math.floor(j / stride)), x, y, this.fineMm);
    const through = dist <= this.fineMm * Math.SQRT1_2 * (1 + 1e-9);
    return { edges, side: through ? 0 : this.contains(x, y) ? 1 : -1 };
  }

  private middleEdges(i: number, j: number): Int32Array {
    const at = j * COARSE * MIDDLE + i, sizeMm = this.coarseMm / MIDDLE;
    return (this.middle[at] ??= this.nearestIn(this.coarseEdges(Math.floor(i / MIDDLE), Math.floor(j / MIDDLE)), this.left + (i + 0.5) * sizeMm, this.top + (j + 0.5) * sizeMm, sizeMm).edges);
  }

  private coarseEdges(i: number, j: number): Int32Array {
    const at = j * COARSE + i, sizeMm = this.coarseMm;
    return (this.coarse[at] ??= this.nearestIn(this.all, this.left + (i + 0.5) * sizeMm, this.top + (j + 0.5) * sizeMm, sizeMm).edges);
  }

  private nearestIn(edges: Int32Array, x: number, y: number, sizeMm: number): { edges: Int32Array; dist: number } {
    const { scratch } = this;
    let least = Infinity;
    for (let k = 0; k < edges.length; k++) {
      scratch[k] = this.distSq(edges[k], x, y);
      if (scratch[k] < least) least = scratch[k];
    }
    const dist = Math.sqrt(least);
    // Twice the half diagonal, and a hair for rounding.
    const within = (dist + sizeMm * Math.SQRT2) ** 2 * (1 + 1e-9);
    let count = 0;
    for (let k = 0; k < edges.length; k++) if (scratch[k] <= within) count++;
    const kept = new Int32Array(count);
    for (let k = 0, at = 0; k < edges.length; k++) if (scratch[k] <= within) kept[at++] = edges[k];
    return { edges: kept, dist };
  }
}
