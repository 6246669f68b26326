/**
 * Cut lines from an SVG drawing that somebody else made. The file is not trusted: it is only read for shapes, nothing in it runs or is
 * fetched, and a file that asks for either is refused as a whole, with a code and words. So are files too large for a die.
 *
 * Input: the file's text. Output: one outline for each path or basic shape that closes, in mm, where it lies in the drawing; warnings for
 * what was left out. Units: CSS Values (1 px = 1/96 in, 1 pt = 1/72 in), width, height and viewBox as SVG 2 chapter 8. XML by
 * saxes, which knows no entities but XML's own five. Cost O(length of the text + points).
 */
import { SaxesParser, type SaxesTagPlain } from 'saxes';
import { ringBox, signedArea } from '../geometry/ring.ts';
import type { Outline, Ring } from '../geometry/types.ts';
import { MM_PER_INCH } from '../geometry/units.ts';
import {
  ellipseRings, IDENTITY, multiplied, parseTransform, pathRings, polygonRings, rectangleRings, numbersIn, SvgImportError,
  type DrawnRing, type Matrix, type PointBudget,
} from './svg-geometry.ts';

export { SvgImportError, type SvgImportCode } from './svg-geometry.ts';

export interface SvgImportOptions { /** Default 5 million characters. */ maxLength?: number; /** Default 100,000. */ maxPoints?: number }
export interface SvgImport { outlines: Outline[]; warnings: string[] }

const MAX_LENGTH = 5_000_000;
const MAX_POINTS = 100_000;
const MAX_ELEMENTS = 50_000;
const MAX_DEPTH = 64;
/** Ends of an open line this near to each other are meant to meet. */
const CLOSING_GAP_MM = 0.05;
/** A shape with less area is a guide line or a speck. */
const SMALLEST_AREA_MM2 = 1;

/** Drawn only where something refers to them, or not at all. */
const NOT_DRAWN = new Set(['defs', 'clipPath', 'mask', 'pattern', 'marker', 'symbol', 'linearGradient', 'radialGradient', 'filter', 'metadata', 'title', 'desc', 'style']);
const SHAPES = new Set(['path', 'rect', 'circle', 'ellipse', 'polygon', 'polyline', 'line']);

interface Frame { name: string; matrix: Matrix; hidden: boolean }

export function importSvg(text: string, options: SvgImportOptions = {}): SvgImport {
  const maxLength = options.maxLength ?? MAX_LENGTH;
  if (text.length > maxLength) throw new SvgImportError('too-large', `The file is too large: at most ${Math.round(maxLength / 1e6)} MB of SVG.`);
  const budget: PointBudget = { left: options.maxPoints ?? MAX_POINTS };
  const outlines: Outline[] = [];
  const warnings = new Set<string>();
  const frames: Frame[] = [];
  let elements = 0;

  const parser = new SaxesParser();
  const stop = (error: Error): never => { throw error; };
  parser.on('error', (error) => stop(new SvgImportError('not-xml', `The file is not well-formed SVG: ${error.message.replace(/\.?$/, '.')}`)));
  parser.on('doctype', () => stop(new SvgImportError('doctype', 'The file brings its own document type, which can make it grow without end. Save it as plain SVG and try again.')));
  parser.on('processinginstruction', ({ target }) => {
    if (target === 'xml-stylesheet') stop(new SvgImportError('outside-reference', 'The file asks for a style sheet from elsewhere. Save it as plain SVG and try again.'));
  });
  const style = (css: string): void => { if (frames.at(-1)?.name === 'style') refuseOutsideCss(css); };
  parser.on('text', style);
  parser.on('cdata', style);
  parser.on('opentag', (tag) => {
    if (++elements > MAX_ELEMENTS) stop(new SvgImportError('too-many-elements', `The file has more than ${MAX_ELEMENTS} elements.`));
    if (frames.length >= MAX_DEPTH) stop(new SvgImportError('too-deep', `The file's groups are nested more than ${MAX_DEPTH} deep.`));
    const name = localName(tag.name);
    refuseActive(name, tag.attributes);
    const parent = frames.at(-1);
    if (parent === undefined && name !== 'svg') stop(new SvgImportError('not-svg', 'The file is XML, but no SVG drawing.'));
    const frame = frameOf(name, tag.attributes, parent, warnings);
    frames.push(frame);
    if (frame.hidden) return;
    if (SHAPES.has(name)) addOutline(outlines, drawShape(name, tag.attributes, frame.matrix, budget), warnings);
    else if (name === 'text' || name === 'tspan') warnings.add('Text was left out: turn it into outlines first.');
    else if (name === 'use') warnings.add('Copies made by reference were left out: turn them into paths first.');
  });
  parser.on('closetag', () => { frames.pop(); });
  parser.write(text).close();

  if (elements === 0) throw new SvgImportError('not-svg', 'The file is empty.');
  if (outlines.length === 0) throw new SvgImportError('no-outlines', ['No closed outline was found in the drawing.', ...warnings].join(' '));
  return { outlines, warnings: [...warnings] };
}

function localName(name: string): string {
  return name.slice(name.indexOf(':') + 1);
}

type Attributes = SaxesTagPlain['attributes'];

/** Whatever could run or be fetched, even if nothing here would do it: such a file is not a plain drawing. */
function refuseActive(name: string, attributes: Attributes): void {
  if (name === 'script') throw new SvgImportError('script', 'The file holds a script. Save it as plain SVG and try again.');
  if (['foreignObject', 'iframe', 'object', 'embed', 'audio', 'video', 'canvas', 'html', 'link'].includes(name)) throw new SvgImportError('foreign-content', `The file holds other content than a drawing (${name}).`);
  for (const [key, value] of Object.entries(attributes)) {
    if (/^on/i.test(localName(key))) throw new SvgImportError('event-handler', `The file holds a script (${key.slice(0, 40)}). Save it as plain SVG and try again.`);
    if (['href', 'src'].includes(localName(key)) && !/^\s*(#|$)/.test(value)) throw new SvgImportError('outside-reference', 'The file refers to something outside it, such as a picture or a link. Save it with outlines only and try again.');
    if (/url\s*\(|@import/i.test(value)) refuseOutsideCss(value);
  }
}

function refuseOutsideCss(css: string): void {
  const outside = /@import|javascript:|expression\s*\(/i.test(css) || [...css.matchAll(/url\s*\(\s*(["']?)\s*([^)]*)/gi)].some(([, , target]) => !target.startsWith('#'));
  if (outside) throw new SvgImportError('outside-reference', 'The file’s styles refer to something outside it. Save it as plain SVG and try again.');
}

function frameOf(name: string, attributes: Attributes, parent: Frame | undefined, warnings: Set<string>): Frame {
  const css = styleProperties(attributes.style ?? '');
  const shown = (key: string): string => css.get(key) ?? attributes[key]?.trim() ?? '';
  const hidden = parent?.hidden === true || NOT_DRAWN.has(name) || shown('display') === 'none' || shown('visibility') === 'hidden';
  let matrix = parent?.matrix ?? IDENTITY;
  if (name === 'svg') matrix = multiplied(matrix, parent === undefined ? rootMatrix(attributes, warnings) : innerMatrix(attributes));
  const transform = css.get('transform') ?? attributes.transform;
  if (transform !== undefined && transform.trim() !== 'none') {
    // CSS writes units into its transforms; those of the attribute have none.
    matrix = multiplied(matrix, parseTransform(transform.replace(/(\d)(px|deg)\b/g, '$1')));
  }
  return { name, matrix, hidden };
}

function styleProperties(style: string): Map<string, string> {
  return new Map(style.split(';').map((part): [string, string] => {
    const at = part.indexOf(':');
    return [part.slice(0, at).trim().toLowerCase(), part.slice(at + 1).trim()];
  }));
}

const MM_PER_PX = MM_PER_INCH / 96;
const PX_PER: Record<string, number> = { '': 1, px: 1, in: 96, cm: 96 / 2.54, mm: 96 / MM_PER_INCH, q: 96 / MM_PER_INCH / 4, pt: 96 / 72, pc: 16 };

/** In px; null for a percentage, which says nothing by itself. */
function lengthPx(text: string | undefined): number | null {
  const trimmed = text?.trim() ?? '';
  if (trimmed === '' || trimmed === 'auto' || trimmed.endsWith('%')) return null;
  const match = /^([+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)\s*([a-zA-Z]*)$/.exec(trimmed);
  const factor = match ? PX_PER[match[2].toLowerCase()] : undefined;
  if (!match || factor === undefined) throw new SvgImportError('bad-length', `“${trimmed.slice(0, 20)}” in the drawing is not a length.`);
  const px = Number(match[1]) * factor;
  if (!Number.isFinite(px)) throw new SvgImportError('bad-number', `“${trimmed.slice(0, 20)}” in the drawing is too large a number.`);
  return px;
}

function rootMatrix(attributes: Attributes, warnings: Set<string>): Matrix {
  const width = lengthPx(attributes.width), height = lengthPx(attributes.height);
  if (width === null && height === null) warnings.add('The drawing does not say how large it is: its units were taken as 1/96 in. Check a size before you use it.');
  return multiplied([MM_PER_PX, 0, 0, MM_PER_PX, 0, 0], viewBoxMatrix(attributes, width, height));
}

function innerMatrix(attributes: Attributes): Matrix {
  const move: Matrix = [1, 0, 0, 1, lengthPx(attributes.x) ?? 0, lengthPx(attributes.y) ?? 0];
  return multiplied(move, viewBoxMatrix(attributes, lengthPx(attributes.width), lengthPx(attributes.height)));
}

/** The drawing is scaled evenly to stand inside width × height, as preserveAspectRatio has it by default, unless that says none. */
function viewBoxMatrix(attributes: Attributes, width: number | null, height: number | null): Matrix {
  const box = attributes.viewBox === undefined ? [] : numbersIn(attributes.viewBox);
  if (box.length !== 4 || !(box[2] > 0 && box[3] > 0)) return IDENTITY;
  const sx = (width ?? (height === null ? box[2] : (height * box[2]) / box[3])) / box[2];
  const sy = (height ?? (width === null ? box[3] : (width * box[3]) / box[2])) / box[3];
  const stretched = attributes.preserveAspectRatio?.trim().startsWith('none') === true;
  const even = Math.min(sx, sy);
  const [x, y] = stretched ? [sx, sy] : [even, even];
  // Where it then stands matters to nobody: outlines are taken out of the sheet one by one.
  return [x, 0, 0, y, -box[0] * x, -box[1] * y];
}

function drawShape(name: string, a: Attributes, matrix: Matrix, budget: PointBudget): DrawnRing[] {
  const px = (key: string): number => lengthPx(a[key]) ?? 0;
  if (name === 'path') return pathRings(a.d ?? '', matrix, budget);
  if (name === 'polygon') return polygonRings(a.points ?? '', true, matrix, budget);
  if (name === 'polyline') return polygonRings(a.points ?? '', false, matrix, budget);
  if (name === 'circle') return ellipseRings(px('cx'), px('cy'), px('r'), px('r'), matrix, budget);
  if (name === 'ellipse') return ellipseRings(px('cx'), px('cy'), px('rx'), px('ry'), matrix, budget);
  if (name === 'line') return [];
  // One radius given stands for both (SVG 2, 10.2).
  const rx = lengthPx(a.rx), ry = lengthPx(a.ry);
  return rectangleRings(px('x'), px('y'), px('width'), px('height'), rx ?? ry ?? 0, ry ?? rx ?? 0, matrix, budget);
}

function addOutline(outlines: Outline[], drawn: DrawnRing[], warnings: Set<string>): void {
  const rings: Ring[] = [];
  for (const { ring, closed } of drawn) {
    const first = ring[0], last = ring[ring.length - 1];
    const gap = Math.hypot(first.x - last.x, first.y - last.y);
    if (!closed && gap > CLOSING_GAP_MM) {
      warnings.add('Lines that do not close were left out.');
      continue;
    }
    // The point that closes the ring is not repeated.
    const open = gap < 1e-9 || !closed ? ring.slice(0, -1) : ring;
    if (open.length >= 3) rings.push(open);
  }
  const area = rings.reduce((sum, ring) => sum + Math.abs(signedArea(ring)), 0);
  if (rings.length === 0) return;
  if (area < SMALLEST_AREA_MM2) warnings.add(`A shape of ${describedSize(rings)} was left out as too small.`);
  else outlines.push({ rings });
}

function describedSize(rings: Ring[]): string {
  const box = ringBox(rings.flat());
  return `${box.w.toFixed(2)} × ${box.h.toFixed(2)} mm`;
}
