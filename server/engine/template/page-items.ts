/**
 * The few marks that pages are made of: lines, boxes, outlines, words; and the colours and widths of the print-shop sheet.
 *
 * Everything in mm. Nothing is mutated. No meaning hangs on a colour: line kinds differ by width and dashes too, so that a page from a
 * black-and-white printer reads the same.
 */
import { ringBox } from '../geometry/ring.ts';
import type { Box, Point, Ring } from '../geometry/types.ts';
import type { PageItem, PagePath, PageRole, PageText } from './types.ts';

export const INK = '#22304A';
export const PALE = '#8C95A8';
export const TINT = '#D5DAE4';
export const RULE = '#B9B1A2';
export const BLACK = '#000000';
export const WHITE = '#FFFFFF';

/** Widths of lines, mm: a laser printer's thinnest sure line is about 0.1. */
export const HAIR_MM = 0.12;
export const FINE_MM = 0.2;
export const FIRM_MM = 0.35;

export type PathStyle = Pick<PagePath, 'strokeMm' | 'stroke' | 'fill' | 'dashMm'>;

export const style = {
  cutLine: { strokeMm: FINE_MM, stroke: PALE },
  cutNow: { strokeMm: FIRM_MM, stroke: INK },
  ink: { strokeMm: HAIR_MM, stroke: INK, fill: TINT },
  body: { strokeMm: HAIR_MM, stroke: PALE, dashMm: [0.8, 0.8] },
  tick: { strokeMm: FINE_MM, stroke: INK },
  trim: { strokeMm: 0.25, stroke: BLACK },
  edge: { strokeMm: HAIR_MM, stroke: PALE, dashMm: [3, 1.5] },
  faint: { strokeMm: HAIR_MM, stroke: RULE },
  firm: { strokeMm: FIRM_MM, stroke: INK },
  solid: { fill: INK },
  black: { fill: BLACK },
} satisfies Record<string, PathStyle>;

export function path(rings: Ring[], role: PageRole, look: PathStyle): PagePath {
  return { kind: 'path', rings, closed: true, role, ...look };
}

export function polyline(rings: Ring[], role: PageRole, look: PathStyle): PagePath {
  return { kind: 'path', rings, closed: false, role, ...look };
}

export function line(x1: number, y1: number, x2: number, y2: number, role: PageRole, look: PathStyle): PagePath {
  return polyline([[{ x: x1, y: y1 }, { x: x2, y: y2 }]], role, look);
}

export function boxRing({ x, y, w, h }: Box): Ring {
  return [{ x, y }, { x: x + w, y }, { x: x + w, y: y + h }, { x, y: y + h }];
}

export function rect(box: Box, role: PageRole, look: PathStyle): PagePath {
  return path([boxRing(box)], role, look);
}

export function words(at: Point, text: string, sizeMm: number, role: PageRole = 'words', more: Partial<Pick<PageText, 'align' | 'bold' | 'turnDeg'>> = {}): PageText {
  return { kind: 'text', at, text, sizeMm, align: 'left', role, ...more };
}

/** A plus sign whose arms meet at `at`. */
export function cross(at: Point, armMm: number, role: PageRole, look: PathStyle): PagePath {
  return polyline([
    [{ x: at.x - armMm, y: at.y }, { x: at.x + armMm, y: at.y }],
    [{ x: at.x, y: at.y - armMm }, { x: at.x, y: at.y + armMm }],
  ], role, look);
}

export function moved(items: readonly PageItem[], dx: number, dy: number): PageItem[] {
  return mapped(items, (p) => ({ x: p.x + dx, y: p.y + dy }));
}

/** For maps that keep sizes and directions of words. */
export function mapped(items: readonly PageItem[], map: (p: Point) => Point): PageItem[] {
  return items.map((item) => (item.kind === 'text' ? { ...item, at: map(item.at) } : { ...item, rings: item.rings.map((ring) => ring.map(map)) }));
}

export function unionBox(boxes: readonly Box[]): Box {
  return ringBox(boxes.flatMap(boxRing));
}

export function grownBox({ x, y, w, h }: Box, by: number): Box {
  return { x: x - by, y: y - by, w: w + 2 * by, h: h + 2 * by };
}
