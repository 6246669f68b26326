/**
 * The edges of an artwork in a tree of circles, so that a question about all ink ("which comes nearest to the label's edge?") looks
 * at a few dozen places instead of hundreds: a circle whose middle is far enough inside needs no look into it (S. M. Omohundro,
 * "Five balltree construction algorithms", ICSI TR-89-063, 1989; the k-d construction).
 *
 * Nodes lie in preorder in flat arrays; `after` is where to go on when a node's inside is not of interest. Lengths mm, relative to the
 * artwork's centre. Built once an artwork in O(n log n); turned in O(n). Nothing is mutated afterwards.
 */
import { sinCos } from '../geometry/transform.ts';
import type { Point, Ring } from '../geometry/types.ts';

export interface InkTree {
  nodes: number;
  x: Float64Array;
  y: Float64Array;
  radius: Float64Array;
  after: Int32Array;
  /** Edges from … to of a leaf; equal for an inner node. */
  from: Int32Array;
  to: Int32Array;
  edges: number;
  ax: Float64Array;
  ay: Float64Array;
  bx: Float64Array;
  by: Float64Array;
  /** Edges that start at the farthest ink each way: the likeliest to come near a label's edge, so looked at first. */
  outermost: Int32Array;
}

/** Edges in a leaf: few enough to look at each, enough to keep the tree shallow. */
const LEAF_EDGES = 4;

interface Edge { ax: number; ay: number; bx: number; by: number }

export function buildInkTree(rings: readonly Ring[]): InkTree {
  const edges = rings.flatMap((ring) => ring.flatMap((a, i) => shortEdges(a, ring[(i + 1) % ring.length])));
  const ordered: Edge[] = [];
  const node: { x: number; y: number; radius: number; after: number; from: number; to: number }[] = [];

  const add = (part: Edge[]): void => {
    const me = { ...circleRound(part), after: 0, from: 0, to: 0 };
    node.push(me);
    if (part.length <= LEAF_EDGES) {
      me.from = ordered.length;
      ordered.push(...part);
      me.to = ordered.length;
    } else {
      const [less, more] = halves(part);
      add(less);
      add(more);
    }
    me.after = node.length;
  };
  add(edges);

  return {
    outermost: outermostEdges(ordered),
    nodes: node.length,
    x: Float64Array.from(node, (n) => n.x), y: Float64Array.from(node, (n) => n.y), radius: Float64Array.from(node, (n) => n.radius),
    after: Int32Array.from(node, (n) => n.after), from: Int32Array.from(node, (n) => n.from), to: Int32Array.from(node, (n) => n.to),
    edges: ordered.length,
    ax: Float64Array.from(ordered, (e) => e.ax), ay: Float64Array.from(ordered, (e) => e.ay),
    bx: Float64Array.from(ordered, (e) => e.bx), by: Float64Array.from(ordered, (e) => e.by),
  };
}

/** Over a longer edge the ends say too little of what lies between them, above all where it reaches out of a label. */
const LONGEST_MM = 3;

function shortEdges(a: Point, b: Point): Edge[] {
  const parts = Math.max(1, Math.ceil(Math.hypot(b.x - a.x, b.y - a.y) / LONGEST_MM));
  // The last part ends exactly where the next edge begins.
  const at = (k: number): Point => (k === parts ? b : { x: a.x + ((b.x - a.x) * k) / parts, y: a.y + ((b.y - a.y) * k) / parts });
  return Array.from({ length: parts }, (_, k) => ({ ax: at(k).x, ay: at(k).y, bx: at(k + 1).x, by: at(k + 1).y }));
}

const DIRECTIONS = 16;

function outermostEdges(edges: readonly Edge[]): Int32Array {
  const found = new Set<number>();
  for (let k = 0; k < DIRECTIONS; k++) {
    const nx = Math.cos((k * 2 * Math.PI) / DIRECTIONS), ny = Math.sin((k * 2 * Math.PI) / DIRECTIONS);
    let far = 0;
    for (let e = 1; e < edges.length; e++) if (nx * edges[e].ax + ny * edges[e].ay > nx * edges[far].ax + ny * edges[far].ay) far = e;
    found.add(far);
  }
  return Int32Array.from(found);
}

function extent(part: readonly Edge[]): { left: number; right: number; top: number; bottom: number } {
  let left = Infinity, right = -Infinity, top = Infinity, bottom = -Infinity;
  for (const e of part) {
    left = Math.min(left, e.ax, e.bx);
    right = Math.max(right, e.ax, e.bx);
    top = Math.min(top, e.ay, e.by);
    bottom = Math.max(bottom, e.ay, e.by);
  }
  return { left, right, top, bottom };
}

function circleRound(part: readonly Edge[]): { x: number; y: number; radius: number } {
  const { left, right, top, bottom } = extent(part);
  const x = (left + right) / 2, y = (top + bottom) / 2;
  let radius = 0;
  for (const e of part) radius = Math.max(radius, Math.hypot(e.ax - x, e.ay - y), Math.hypot(e.bx - x, e.by - y));
  return { x, y, radius };
}

/** At the median of the longer way. */
function halves(part: Edge[]): [Edge[], Edge[]] {
  const { left, right, top, bottom } = extent(part);
  const along = right - left >= bottom - top ? (e: Edge): number => e.ax + e.bx : (e: Edge): number => e.ay + e.by;
  const sorted = [...part].sort((p, q) => along(p) - along(q));
  const middle = sorted.length >> 1;
  return [sorted.slice(0, middle), sorted.slice(middle)];
}

export function turnInkTree(tree: InkTree, angleDeg: number): InkTree {
  if (angleDeg === 0) return tree;
  const { sin, cos } = sinCos(angleDeg);
  const turn = (xs: Float64Array, ys: Float64Array): [Float64Array, Float64Array] => [xs.map((x, i) => cos * x - sin * ys[i]), ys.map((y, i) => sin * xs[i] + cos * y)];
  const [x, y] = turn(tree.x, tree.y), [ax, ay] = turn(tree.ax, tree.ay), [bx, by] = turn(tree.bx, tree.by);
  return { ...tree, x, y, ax, ay, bx, by };
}
