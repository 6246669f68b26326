/**
 * Cut lines as an SVG drawing at true size (W3C SVG 2: width and height in mm, viewBox in the same mm), one group for each die, for a cutting
 * machine or for another program. Input: dies by name; output: the file's text. Points to 0.001 mm. Nothing is mutated.
 */
import { outlineBox } from '../geometry/ring.ts';
import type { Outline } from '../geometry/types.ts';
import { dieOutline, usableOutline } from './die-outline.ts';
import type { DieGeometry } from './types.ts';

export interface SvgExportOptions {
  title?: string;
  /** Draw the line that the ink keeps inside of, too, dashed. */
  stitchLines?: boolean;
  /** Between dies and round the sheet; default 5 mm. */
  gapMm?: number;
  /** Rows are broken before they grow wider; default 300 mm. */
  rowMm?: number;
}

const DEFAULT_GAP_MM = 5;
const DEFAULT_ROW_MM = 300;
/** Hairline: cutting programs follow its middle. */
const STROKE_MM = 0.1;

export function cutLinesSvg(dies: readonly { name: string; geometry: DieGeometry }[], options: SvgExportOptions = {}): string {
  const gap = options.gapMm ?? DEFAULT_GAP_MM, rowMm = options.rowMm ?? DEFAULT_ROW_MM;
  let x = gap, y = gap, rowHeight = 0, width = 2 * gap;
  const groups = dies.map(({ name, geometry }, i) => {
    const outline = dieOutline(geometry);
    const { w, h } = outlineBox(outline);
    if (x > gap && x + w + gap > rowMm) {
      x = gap;
      y += rowHeight + gap;
      rowHeight = 0;
    }
    const group = dieGroup(`die-${i + 1}`, name, x, y, outline, options.stitchLines && geometry.stitchInsetMm ? usableOutline(geometry) : null);
    x += w + gap;
    rowHeight = Math.max(rowHeight, h);
    width = Math.max(width, x);
    return group;
  });
  const size = { w: rounded(width), h: rounded(y + rowHeight + gap) };
  return [
    '<?xml version="1.0" encoding="UTF-8"?>',
    `<svg xmlns="http://www.w3.org/2000/svg" width="${size.w}mm" height="${size.h}mm" viewBox="0 0 ${size.w} ${size.h}">`,
    `<title>${escaped(options.title ?? 'Cut lines')}</title>`,
    ...groups,
    '</svg>', '',
  ].join('\n');
}

function dieGroup(id: string, name: string, x: number, y: number, cut: Outline, stitch: Outline | null): string {
  const lines = [`<path d="${pathData(cut)}"/>`];
  if (stitch !== null && stitch.rings.length > 0) lines.push(`<path d="${pathData(stitch)}" stroke-dasharray="1 1"/>`);
  return `<g id="${id}" transform="translate(${rounded(x)} ${rounded(y)})" fill="none" stroke="#000" stroke-width="${STROKE_MM}"><title>${escaped(name)}</title>${lines.join('')}</g>`;
}

/** Also for drawing in a page. */
export function pathData(outline: Outline): string {
  return outline.rings.map((ring) => `M${ring.map((p) => `${rounded(p.x)} ${rounded(p.y)}`).join('L')}Z`).join('');
}

function rounded(mm: number): number {
  return Math.round(mm * 1000) / 1000;
}

/** XML 1.0 §2.4; characters that XML cannot hold at all are left out. */
function escaped(text: string): string {
  return text.replace(/[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/g, '').replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;').replace(/"/g, '&quot;');
}
