/**
 * A piece of ink divided along lines that a person drew across it.
 *
 * Input: an outline and lines, one unit; not mutated. Output: the outlines of the pieces, from left to right; the outline itself where no
 * line goes right through it. Method: slits SLIT wide are taken away along the lines (clipper2-ts) and what no longer hangs together is a
 * piece of its own. A slit that ends inside the ink is closed again, since the outline is kept as it was.
 */
import { Clipper, FillRule, PolyTree64, ClipType, Clipper64, type Path64, type PolyPath64 } from 'clipper2-ts';
import { outlineBox } from '../geometry/ring.ts';
import type { Outline, Point, Ring } from '../geometry/types.ts';

export interface DividingLine { from: Point; to: Point }

/** Share of the outline's longer side: far below what is seen, far above clipper's whole numbers. */
const SLIT = 2e-5;
/** Clipper counts in whole numbers: this many along the outline's longer side. */
const UNITS = 1e6;
/** A piece narrower than this many slits is a splinter of the cut. */
const SPLINTER_SLITS = 3;

export function divideOutline(outline: Outline, lines: readonly DividingLine[]): Outline[] {
  const box = outlineBox(outline);
  const side = Math.max(box.w, box.h) || 1, units = UNITS / side;
  const toPath = (ring: Ring): Path64 => ring.map((p) => ({ x: Math.round((p.x - box.x) * units), y: Math.round((p.y - box.y) * units), z: 0 }));
  const slits = lines.map((line) => slit(line, SLIT * side)).filter((ring) => ring !== null).map(toPath);
  if (slits.length === 0) return [outline];

  const tree = new PolyTree64(), clipper = new Clipper64();
  clipper.addSubject(outline.rings.map(toPath));
  clipper.addClip(Clipper.union(slits, FillRule.NonZero));
  clipper.execute(ClipType.Difference, FillRule.EvenOdd, tree);
  const pieces: Outline[] = [];
  collect(tree, pieces, (path) => path.map((p) => ({ x: p.x / units + box.x, y: p.y / units + box.y })));
  const whole = pieces.filter((piece) => { const b = outlineBox(piece); return Math.min(b.w, b.h) > SPLINTER_SLITS * SLIT * side; });
  if (whole.length < 2) return [outline];
  return whole.sort((a, b) => outlineBox(a).x - outlineBox(b).x || outlineBox(a).y - outlineBox(b).y);
}

/** A rectangle along the line; null for a line without length. */
function slit(line: DividingLine, width: number): Ring | null {
  const dx = line.to.x - line.from.x, dy = line.to.y - line.from.y, length = Math.hypot(dx, dy);
  if (!(length > 0)) return null;
  const nx = (-dy / length) * (width / 2), ny = (dx / length) * (width / 2);
  const { from, to } = line;
  return [{ x: from.x + nx, y: from.y + ny }, { x: to.x + nx, y: to.y + ny }, { x: to.x - nx, y: to.y - ny }, { x: from.x - nx, y: from.y - ny }];
}

/** Outer rings with the holes right inside them; islands in holes are pieces again. */
function collect(node: PolyPath64 | PolyTree64, pieces: Outline[], toRing: (path: Path64) => Ring): void {
  for (let i = 0; i < node.count; i++) {
    const outer = node.child(i) as PolyPath64;
    const rings = [toRing(outer.poly ?? [])];
    for (let h = 0; h < outer.count; h++) {
      const hole = outer.child(h) as PolyPath64;
      rings.push(toRing(hole.poly ?? []));
      collect(hole, pieces, toRing);
    }
    pieces.push({ rings });
  }
}
