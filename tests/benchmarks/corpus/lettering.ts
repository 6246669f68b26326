/**
 * Sentiments drawn from open fonts: exact outlines in mm, the ground truth of every made picture. Glyph shapes and advances come from
 * opentype.js; curves are flattened within FLATNESS_MM. Origin: top left of the ink's box.
 */
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import opentype from 'opentype.js';
import { outlineBox } from '../../../server/engine/geometry/ring.ts';
import type { Outline, Point, Ring } from '../../../server/engine/geometry/types.ts';

const require = createRequire(import.meta.url);
const FLATNESS_MM = 0.005;
const loaded = new Map<string, opentype.Font>();

/** Package names under @fontsource, with the weight that is drawn. */
export type FontName = string;

export function loadFont(name: FontName, weight = 400): opentype.Font {
  const key = `${name}-${weight}`;
  let font = loaded.get(key);
  if (!font) {
    const bytes = readFileSync(require.resolve(`@fontsource/${name}/files/${name}-latin-${weight}-normal.woff`));
    font = opentype.parse(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength) as ArrayBuffer);
    loaded.set(key, font);
  }
  return font;
}

export interface Lettering {
  lines: string[];
  font: FontName;
  weight?: number;
  /** Height of the em square. */
  sizeMm: number;
  /** Added between letters, in ems. */
  tracking?: number;
  /** Distance of baselines, in ems. */
  leading?: number;
  align?: 'left' | 'middle';
}

/** Pieces may overlap, as letters of a script do: fill non-zero. The union is what a print shows. */
export interface Drawing { rings: Ring[]; box: { x: number; y: number; w: number; h: number } }

export function drawLettering(lettering: Lettering): Drawing {
  const font = loadFont(lettering.font, lettering.weight);
  const { sizeMm, tracking = 0, leading = 1.25, align = 'middle' } = lettering;
  const lines = lettering.lines.map((line) => setLine(font, line, sizeMm, tracking));
  const widest = Math.max(...lines.map((line) => line.widthMm));
  const rings = lines.flatMap((line, i) => {
    const left = align === 'left' ? 0 : (widest - line.widthMm) / 2;
    return line.glyphs.flatMap(({ glyph, xMm }) => flatten(glyph.getPath(left + xMm, i * leading * sizeMm, sizeMm).commands));
  });
  return toOrigin(rings);
}

/** Letter by letter with the font's own advances and kerning; no ligatures, which a stamp's maker may or may not use. */
function setLine(font: opentype.Font, line: string, sizeMm: number, tracking: number): { glyphs: { glyph: opentype.Glyph; xMm: number }[]; widthMm: number } {
  const perUnit = sizeMm / font.unitsPerEm;
  let xMm = 0, before: opentype.Glyph | null = null;
  const glyphs = [...line].map((letter) => {
    const glyph = font.charToGlyph(letter);
    if (before) xMm += font.getKerningValue(before, glyph) * perUnit + tracking * sizeMm;
    const placed = { glyph, xMm };
    xMm += (glyph.advanceWidth ?? 0) * perUnit;
    before = glyph;
    return placed;
  });
  return { glyphs, widthMm: xMm };
}

export function toOrigin(rings: Ring[]): Drawing {
  const box = outlineBox({ rings });
  return { rings: rings.map((ring) => ring.map((p) => ({ x: p.x - box.x, y: p.y - box.y }))), box: { x: 0, y: 0, w: box.w, h: box.h } };
}

function flatten(commands: opentype.PathCommand[]): Ring[] {
  const rings: Ring[] = [];
  let ring: Ring = [], at: Point = { x: 0, y: 0 };
  const close = () => {
    if (ring.length >= 3) rings.push(ring);
    ring = [];
  };
  for (const c of commands) {
    if (c.type === 'M') { close(); ring = [{ x: c.x, y: c.y }]; }
    else if (c.type === 'L') ring.push({ x: c.x, y: c.y });
    else if (c.type === 'Q') ring.push(...curve(at, { x: c.x1, y: c.y1 }, { x: c.x1, y: c.y1 }, { x: c.x, y: c.y }, true));
    else if (c.type === 'C') ring.push(...curve(at, { x: c.x1, y: c.y1 }, { x: c.x2, y: c.y2 }, { x: c.x, y: c.y }, false));
    else close();
    if (c.type !== 'Z') at = { x: c.x, y: c.y };
  }
  close();
  return rings;
}

function curve(a: Point, b: Point, c: Point, d: Point, quadratic: boolean): Point[] {
  const bend = Math.hypot(a.x - 2 * b.x + c.x, a.y - 2 * b.y + c.y) + Math.hypot(b.x - 2 * c.x + d.x, b.y - 2 * c.y + d.y);
  const steps = Math.max(2, Math.ceil(Math.sqrt(bend / FLATNESS_MM)));
  return Array.from({ length: steps }, (_, i) => {
    const t = (i + 1) / steps, s = 1 - t;
    const at = (k: 'x' | 'y') => (quadratic ? s * s * a[k] + 2 * s * t * b[k] + t * t * d[k] : s ** 3 * a[k] + 3 * s * s * t * b[k] + 3 * s * t * t * c[k] + t ** 3 * d[k]);
    return { x: at('x'), y: at('y') };
  });
}

export function outlineOf(drawing: Drawing): Outline {
  return { rings: drawing.rings };
}
