/**
 * Sentiments as outlines with about 500 points, from open fonts, and dies of all shapes, for benchmarks and tests of fitting. Wordings are
 * plain greetings. The same every time: nothing is random.
 */
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import opentype from 'opentype.js';
import { DIE_SHAPES, startingShape } from '../../server/engine/fit/die-shapes.ts';
import type { DieGeometry, DieShape } from '../../server/engine/fit/index.ts';
import type { Outline, Point, Ring } from '../../server/engine/geometry/types.ts';

const resolve = createRequire(import.meta.url).resolve;
const FONTS = ['pacifico', 'lora', 'dancing-script', 'josefin-sans', 'great-vibes', 'quicksand'];
const WORDS = ['thank you', 'happy birthday', 'hello', 'with love', 'get well soon', 'just because', 'best wishes', 'for you', 'well done', 'good luck'];

/** count sentiments from 18 to 80 mm wide, each ring thinned so that all of an artwork has about `points` points. */
export function sentiments(count: number, points = 500): Outline[] {
  return Array.from({ length: count }, (_, i) => sentiment(WORDS[i % WORDS.length], FONTS[i % FONTS.length], 18 + ((i * 37) % 63), points));
}

export function sentiment(words: string, font: string, widthMm: number, points: number): Outline {
  const file = readFileSync(resolve(`@fontsource/${font}/files/${font}-latin-400-normal.woff`));
  const loaded = opentype.parse(file.buffer.slice(file.byteOffset, file.byteOffset + file.byteLength) as ArrayBuffer);
  // Letter by letter: shaping is of no interest here, and not every font's tables can be read.
  let pen = 0;
  const commands = [...words].flatMap((letter) => {
    const glyph = loaded.charToGlyph(letter);
    const path = glyph.getPath(pen, 0, loaded.unitsPerEm);
    pen += glyph.advanceWidth ?? 0;
    return path.commands as PathCommand[];
  });
  const rings = flattened(commands, points);
  const all = rings.flat();
  const left = Math.min(...all.map((p) => p.x)), right = Math.max(...all.map((p) => p.x)), top = Math.min(...all.map((p) => p.y));
  const scale = widthMm / (right - left);
  return { rings: rings.map((ring) => ring.map((p) => ({ x: (p.x - left) * scale, y: (p.y - top) * scale }))) };
}

interface PathCommand { type: 'M' | 'L' | 'C' | 'Q' | 'Z'; x?: number; y?: number; x1?: number; y1?: number; x2?: number; y2?: number }

/** As many steps on each curve as bring the whole near the wanted number of points. */
function flattened(commands: PathCommand[], points: number): Ring[] {
  const curves = commands.filter((c) => c.type === 'C' || c.type === 'Q').length || 1;
  const lines = commands.filter((c) => c.type === 'L').length;
  const steps = Math.max(1, Math.round((points - lines) / curves));
  const rings: Ring[] = [];
  let ring: Ring = [];
  for (const c of commands) {
    if (c.type === 'M') rings.push((ring = [{ x: c.x!, y: c.y! }]));
    else if (c.type === 'L') ring.push({ x: c.x!, y: c.y! });
    else if (c.type !== 'Z') ring.push(...curve(ring[ring.length - 1], c, steps));
  }
  return rings.filter((r) => r.length > 2);
}

function curve(from: Point, c: PathCommand, steps: number): Point[] {
  return Array.from({ length: steps }, (_, i) => {
    const t = (i + 1) / steps, u = 1 - t;
    if (c.type === 'Q') return { x: u * u * from.x + 2 * u * t * c.x1! + t * t * c.x!, y: u * u * from.y + 2 * u * t * c.y1! + t * t * c.y! };
    return {
      x: u ** 3 * from.x + 3 * u * u * t * c.x1! + 3 * u * t * t * c.x2! + t ** 3 * c.x!,
      y: u ** 3 * from.y + 3 * u * u * t * c.y1! + 3 * u * t * t * c.y2! + t ** 3 * c.y!,
    };
  });
}

const CONVEX = ['rectangle', 'oval', 'stadium', 'hexagon', 'arch'];

/** Sizes of nested sets, from 110 × 60 down to 33 × 18. */
export function dies(count: number, which: 'convex' | 'concave' | 'mixed'): DieGeometry[] {
  const forms = DIE_SHAPES.filter((row) => !row.equalSides && (which === 'mixed' || CONVEX.includes(row.kind) === (which === 'convex')));
  return Array.from({ length: count }, (_, i) => {
    const share = 1 - 0.7 * (i / count);
    const start = startingShape(forms[i % forms.length].form);
    return { shape: scaled(start, (110 / 70) * share), ...(i % 3 === 0 ? { stitchInsetMm: 1.5 } : {}) };
  });
}

function scaled(shape: DieShape, by: number): DieShape {
  return Object.fromEntries(Object.entries(shape).map(([key, value]) => [key, typeof value === 'number' ? value * by : value])) as unknown as DieShape;
}
