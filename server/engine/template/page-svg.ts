/**
 * A page as SVG (W3C SVG 2), for the preview: path strings and words, ready to be bound. One user unit is 1 mm; the viewBox is the paper.
 * Input: a page description. Output: plain data. Nothing is mutated; O(points). Runs in the browser.
 */
import type { Ring } from '../geometry/types.ts';
import type { PageDescription, PagePath, PageRole, PageText } from './types.ts';

export interface SvgPath { kind: 'path'; role: PageRole; d: string; fill: string; stroke: string; strokeWidth: number; dashArray: string | undefined }
export interface SvgText { kind: 'text'; role: PageRole; x: number; y: number; text: string; fontSize: number; fontWeight: 400 | 600; anchor: 'start' | 'middle' | 'end'; transform: string | undefined }
export interface SvgPage { name: string; viewBox: string; widthMm: number; heightMm: number; items: (SvgPath | SvgText)[] }

export function svgPage(page: PageDescription): SvgPage {
  return {
    name: page.name, widthMm: page.widthMm, heightMm: page.heightMm, viewBox: `0 0 ${rounded(page.widthMm)} ${rounded(page.heightMm)}`,
    items: page.items.map((item) => (item.kind === 'path' ? svgPath(item) : svgText(item))),
  };
}

/** Fill even-odd (`fill-rule`). */
export function pathData(rings: readonly Ring[], closed: boolean): string {
  return rings.filter((ring) => ring.length > 0).map((ring) => `M${ring.map((p) => `${rounded(p.x)} ${rounded(p.y)}`).join('L')}${closed ? 'Z' : ''}`).join('');
}

function svgPath(item: PagePath): SvgPath {
  const stroked = item.strokeMm !== undefined;
  return {
    kind: 'path', role: item.role, d: pathData(item.rings, item.closed), fill: item.fill ?? 'none', stroke: stroked ? item.stroke ?? '#000' : 'none',
    strokeWidth: item.strokeMm ?? 0, dashArray: stroked && item.dashMm ? item.dashMm.join(' ') : undefined,
  };
}

function svgText(item: PageText): SvgText {
  const x = rounded(item.at.x), y = rounded(item.at.y);
  return {
    kind: 'text', role: item.role, x, y, text: item.text, fontSize: rounded(item.sizeMm), fontWeight: item.bold ? 600 : 400,
    anchor: item.align === 'left' ? 'start' : item.align === 'middle' ? 'middle' : 'end', transform: item.turnDeg ? `rotate(${item.turnDeg} ${x} ${y})` : undefined,
  };
}

/** A thousandth of a millimetre: a twentieth of a printer's dot. */
function rounded(mm: number): number {
  return Math.round(mm * 1000) / 1000;
}
