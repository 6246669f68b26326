/**
 * The bed with everything that stands and lies on it in one setup, in bed coordinates: the drawing of the placing sheet and, mirrored, of
 * the lid sheet. Both are made from this one list, so that they cannot differ.
 */
import { distanceToConvex } from '../geometry/convex.ts';
import { boxCentre, outlineBox } from '../geometry/ring.ts';
import { ellipseArc } from '../geometry/arc.ts';
import type { Box, Point, Side } from '../geometry/types.ts';
import { boxRing, FINE_MM, grownBox, HAIR_MM, INK, line, mapped, PALE, path, polyline, rect, style, unionBox, words } from './page-items.ts';
import type { LabelShape, PieceShape, PlaceShapes } from './plan-shapes.ts';
import { inkLetters } from './template-context.ts';
import type { SetupContext } from './template-context.ts';
import type { PageItem } from './types.ts';

export const NUMBER_MM = 3.6;
/** Words outside the bed: hinge, corner. */
const OUTSIDE_MM = 7;
const CORNER_ARM_MM = 25;
/** The corner's mark keeps off the sheet's edge, which scissors follow, and is this wide. */
const CORNER_GAP_MM = 0.8;
const CORNER_WIDTH_MM = 2;
const CORNER_REACH_MM = CORNER_GAP_MM + CORNER_WIDTH_MM;
const HATCH_MM = 3;
/** A number stands this far inside its label's cut line, mm. */
const NUMBER_INSET_MM = 3.6;

export function bedItems(context: SetupContext, trim: 'sheet' | 'lid'): PageItem[] {
  const { order: { platform }, frame, places } = context;
  const bed = { x: 0, y: 0, w: platform.widthMm, h: platform.heightMm };
  return [
    ...platform.keepOuts.flatMap(keepOutItems),
    rect(bed, 'bed-edge', style.faint),
    rect(frame.lid, trim === 'lid' ? 'trim-line' : 'lid-edge', trim === 'lid' ? style.trim : style.edge),
    rect(frame.sheet, trim === 'sheet' ? 'trim-line' : 'sheet-edge', trim === 'sheet' ? style.trim : style.edge),
    ...cornerItems(frame.sheet, platform.corner ?? 'top-left'),
    ...hingeItems(bed, platform.hinge ?? 'left'),
    ...places.flatMap((place) => place.labels.map((label) => cutLineItem(label))),
    ...places.flatMap((place) => place.pieces.flatMap((piece) => pieceItems(piece, context.labels.sentiments[piece.stampId]?.boxOnly === true))),
    ...places.flatMap((place) => place.labels.length === 0 ? [] : [numberItem(place, inkLetters(context, place))]),
  ];
}

/** What is useful first, what is needed last; see drawingPages. */
export function bedRegions({ order: { platform }, frame, places }: SetupContext, trim: 'sheet' | 'lid'): Box[] {
  const bed = { x: 0, y: 0, w: platform.widthMm, h: platform.heightMm };
  const drawn = places.map((place) => place.box);
  const trimmed = grownBox(trim === 'sheet' ? frame.sheet : frame.lid, CORNER_REACH_MM + 0.4);
  const whole = unionBox([grownBox(bed, OUTSIDE_MM), grownBox(frame.sheet, OUTSIDE_MM), trimmed, ...drawn]);
  return [whole, unionBox([grownBox(bed, CORNER_REACH_MM + 0.4), trimmed, ...drawn]), unionBox([trimmed, ...drawn]), trimmed];
}

export function cutLineItem({ outline, cut }: LabelShape): PageItem {
  return path(outline.rings, 'cut-line', cut === 'die' ? style.cutLine : { ...style.cutLine, dashMm: cut === 'straight' ? [4, 1.2] : [1.2, 1.2] });
}

export function inkItems({ ink }: Pick<PieceShape, 'ink'>, boxOnly: boolean): PageItem[] {
  if (!boxOnly) return [path(ink.rings, 'ink', style.ink)];
  const { x, y } = boxCentre(outlineBox(ink));
  return [path(ink.rings, 'ink', { strokeMm: HAIR_MM, stroke: INK, dashMm: [2, 1] }), words({ x, y: y + 0.8 }, 'size only, no picture', 2.2, 'caption', { align: 'middle' })];
}

function pieceItems(piece: PieceShape, boxOnly: boolean): PageItem[] {
  return [
    path([piece.body], 'body', style.body),
    ...inkItems(piece, boxOnly),
    polyline(piece.baselineTicks, 'baseline-tick', style.tick),
    polyline(piece.centreTicks, 'centre-tick', { strokeMm: HAIR_MM, stroke: INK }),
  ];
}

/** In that corner of the label that is furthest from its stamps. */
function numberItem(place: PlaceShapes, letters: string): PageItem {
  const at = numberPlace(place.labels[0], place.pieces.map((piece) => piece.body));
  return words({ x: at.x, y: at.y + NUMBER_MM * 0.36 }, letters === '' ? `${place.number}` : `${place.number} ${letters}`, NUMBER_MM, 'number', { align: 'middle', bold: true });
}

export function numberPlace(label: LabelShape, bodies: readonly Point[][]): Point {
  const box = outlineBox(label.outline), middle = boxCentre(box);
  const points = label.outline.rings.flatMap((ring) => ring);
  const candidates = boxRing(box).map((corner) => {
    let near = points[0], best = Infinity;
    for (const p of points) {
      const d = (p.x - corner.x) ** 2 + (p.y - corner.y) ** 2;
      if (d < best) { best = d; near = p; }
    }
    const length = Math.hypot(middle.x - near.x, middle.y - near.y) || 1;
    const inset = Math.min(NUMBER_INSET_MM * 1.3, length);
    return { x: near.x + ((middle.x - near.x) * inset) / length, y: near.y + ((middle.y - near.y) * inset) / length };
  });
  const room = (p: Point) => Math.min(...bodies.map((body) => distanceToConvex(body, p.x, p.y)), Infinity);
  return candidates.reduce((best, p) => (room(p) > room(best) + 0.01 ? p : best));
}

function keepOutItems(box: Box): PageItem[] {
  const hatch: [Point, Point][] = [];
  for (let d = HATCH_MM; d < box.w + box.h; d += HATCH_MM) {
    hatch.push([
      { x: box.x + Math.min(d, box.w), y: box.y + Math.max(0, d - box.w) },
      { x: box.x + Math.max(0, d - box.h), y: box.y + Math.min(d, box.h) },
    ]);
  }
  return [
    polyline(hatch, 'keep-out', { strokeMm: 0.1, stroke: PALE }),
    rect(box, 'keep-out', { strokeMm: FINE_MM, stroke: INK }),
    words({ x: box.x + box.w / 2, y: box.y + box.h + 2.6 }, 'keep-out', 2.2, 'caption', { align: 'middle' }),
  ];
}

/** Lies outside the sheet's edges, along both that touch the corner. */
export function cornerItems(sheet: Box, corner: NonNullable<SetupContext['order']['platform']['corner']>, caption = 'registration corner'): PageItem[] {
  const left = corner.endsWith('left'), top = corner.startsWith('top');
  const at = { x: left ? sheet.x : sheet.x + sheet.w, y: top ? sheet.y : sheet.y + sheet.h };
  const sx = left ? 1 : -1, sy = top ? 1 : -1;
  const near = -CORNER_GAP_MM, far = -CORNER_REACH_MM;
  const ell = [[far, far], [CORNER_ARM_MM, far], [CORNER_ARM_MM, near], [near, near], [near, CORNER_ARM_MM], [far, CORNER_ARM_MM]];
  return [
    path([ell.map(([x, y]) => ({ x: at.x + sx * x, y: at.y + sy * y }))], 'corner', style.solid),
    words({ x: at.x, y: top ? at.y - CORNER_REACH_MM - 0.8 : at.y + CORNER_REACH_MM + 2.6 }, caption, 2.4, 'caption', { align: left ? 'left' : 'right' }),
  ];
}

function hingeItems(bed: Box, side: Side): PageItem[] {
  const near = 3.6, far = 4.3;
  const look = { strokeMm: FINE_MM, stroke: INK };
  const upright = side === 'left' || side === 'right';
  const place = (d: number) => ({ left: bed.x - d, right: bed.x + bed.w + d, top: bed.y - d, bottom: bed.y + bed.h + d })[side];
  const along = (d: number) => (upright ? line(place(d), bed.y + bed.h * 0.2, place(d), bed.y + bed.h * 0.8, 'hinge', look) : line(bed.x + bed.w * 0.3, place(d), bed.x + bed.w * 0.7, place(d), 'hinge', look));
  const caption = upright
    ? words({ x: side === 'left' ? place(5) : place(6.8), y: bed.y + bed.h / 2 }, 'hinge', 2.4, 'hinge', { align: 'middle', turnDeg: -90 })
    : words({ x: bed.x + bed.w / 2, y: side === 'top' ? place(5) : place(6.8) }, 'hinge', 2.4, 'hinge', { align: 'middle' });
  return [along(near), along(far), caption];
}

/** An arc with a head, clockwise, for how the sheet is turned. */
export function turnArrow(centre: Point, radius: number, sweepDeg: number): PageItem[] {
  const arc = ellipseArc(centre, radius, radius, -90, sweepDeg);
  const end = arc[arc.length - 1];
  const heading = ((-90 + sweepDeg + 90) * Math.PI) / 180;
  const wing = (turn: number): Point => ({ x: end.x + Math.cos(heading + turn) * 1.5, y: end.y + Math.sin(heading + turn) * 1.5 });
  const look = { strokeMm: 0.3, stroke: INK };
  return [polyline([arc], 'turn-arrow', look), polyline([[wing(Math.PI - 0.5), end, wing(Math.PI + 0.5)]], 'turn-arrow', look)];
}

/**
 * Paths are mirrored; words keep reading normally and stand at the mirrored places: a word's box is mirrored, not its letters.
 * `across` x: about the vertical line that takes 0 to `size`; y: about the level one.
 */
export function mirrored(items: readonly PageItem[], across: 'x' | 'y', size: number): PageItem[] {
  const map = across === 'x' ? (p: Point): Point => ({ x: size - p.x, y: p.y }) : (p: Point): Point => ({ x: p.x, y: size - p.y });
  return items.flatMap((item): PageItem[] => {
    if (item.kind === 'path') return mapped([item], map);
    const at = map(item.at);
    // The middle of letters is about 0.36 of their size above the baseline.
    const rise = 0.72 * item.sizeMm;
    if (across === 'y') return [{ ...item, at: item.turnDeg ? at : { x: at.x, y: at.y + rise } }];
    if (item.turnDeg) return [{ ...item, at: { x: at.x + rise, y: at.y } }];
    return [{ ...item, at, align: item.align === 'left' ? 'right' : item.align === 'right' ? 'left' : 'middle' }];
  });
}

export function mirroredBox({ x, y, w, h }: Box, across: 'x' | 'y', size: number): Box {
  return across === 'x' ? { x: size - x - w, y, w, h } : { x, y: size - y - h, w, h };
}
