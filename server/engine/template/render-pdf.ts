/**
 * Page descriptions as PDF 1.7 (ISO 32000-1), by pdfmake. On the server only: it reads the fonts that are shipped with the application.
 *
 * Coordinates are rounded to 0.01 pt (0.0035 mm). The document asks not to be scaled (/PrintScaling /None, §12.2) and to show its title. Nothing is ever fetched:
 * addresses are refused, and so are local files but for the fonts. All pages have one size. Characters that Work Sans does not have are
 * written as “?”. No clock is read: the same pages give the same bytes but for what pdfmake stamps on them.
 */
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import opentype from 'opentype.js';
import type { Font } from 'opentype.js';
import pdfmake from 'pdfmake';
import type { CanvasElement, Content, TDocumentDefinitions } from 'pdfmake/interfaces';
import { POINTS_PER_INCH, MM_PER_INCH } from '../geometry/units.ts';
import { evenOddAsNonZero } from './fill-rings.ts';
import { INK } from './page-items.ts';
import { isCommon, textWidth } from './text-width.ts';
import type { PageDescription, PageDocument, PagePath, PageText } from './types.ts';

const PT_PER_MM = POINTS_PER_INCH / MM_PER_INCH;
const FAMILIES = { 'Work Sans': 'latin', 'Work Sans Ext': 'latin-ext' } as const;
type Family = keyof typeof FAMILIES;
const STYLES = { normal: 400, bold: 600 } as const;
type Style = keyof typeof STYLES;

interface Face { family: Family; style: Style; path: string; /** Parsed when first asked for: inflating it takes longer than most documents. */ font(): Font }
/** Of Work Sans, in parts of the size. */
const ASCENDER = 0.93;
interface PdfMaker {
  setFonts(fonts: Record<string, Record<string, string>>): void;
  setUrlAccessPolicy(allow: (url: string) => boolean): void;
  setLocalAccessPolicy(allow: (path: string) => boolean): void;
  createPdf(definition: TDocumentDefinitions, options?: object): PdfOutput;
}
interface PdfOutput { getStream(): Promise<PdfStream>; getBuffer(): Promise<Buffer> }
interface PdfStream { _root: { data: { ViewerPreferences?: { data: Record<string, unknown> } } } }

export async function renderPdf(document: PageDocument): Promise<Uint8Array> {
  const faces = loadFaces();
  const maker = preparedMaker(faces);
  const [first] = document.pages;
  const size = first ?? { widthMm: 210, heightMm: 297 };
  const other = document.pages.find((page) => page.widthMm !== size.widthMm || page.heightMm !== size.heightMm);
  if (other) throw new RangeError(`All pages of a document have one size: “${other.name}” is ${other.widthMm} × ${other.heightMm} mm, “${first.name}” ${size.widthMm} × ${size.heightMm} mm.`);
  const output = maker.createPdf({
    version: '1.7', displayTitle: true, compress: true, language: 'en',
    pageSize: { width: size.widthMm * PT_PER_MM, height: size.heightMm * PT_PER_MM }, pageMargins: 0,
    info: { title: document.title, subject: 'Templates at actual size', creator: 'Inkmuster', producer: 'Inkmuster' },
    defaultStyle: { font: 'Work Sans', color: INK, lineHeight: 1 },
    content: document.pages.length === 0 ? [{ text: '' }] : document.pages.flatMap((page, i) => pageContent(page, faces, i > 0)),
  });
  const stream = await output.getStream();
  const preferences = stream._root.data.ViewerPreferences;
  if (!preferences) throw new Error('The PDF writer made no viewer preferences; it would be scaled by some printers.');
  preferences.data.PrintScaling = 'None';
  return new Uint8Array(await output.getBuffer());
}

/** For one document: the engine keeps no state. */
function loadFaces(): Face[] {
  const names = Object.keys(FAMILIES) as Family[], styles = Object.keys(STYLES) as Style[];
  return names.flatMap((family) => styles.map((style) => {
    const path = fileURLToPath(import.meta.resolve(`@fontsource/work-sans/files/work-sans-${FAMILIES[family]}-${STYLES[style]}-normal.woff`));
    let parsed: Font | undefined;
    return { family, style, path, font: () => (parsed ??= parseFont(path)) };
  }));
}

function parseFont(path: string): Font {
  const bytes = readFileSync(path);
  return opentype.parse(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength) as ArrayBuffer);
}

/** The package is one object for the whole process: it is always set to the same values. */
function preparedMaker(faces: readonly Face[]): PdfMaker {
  const maker = pdfmake as unknown as PdfMaker;
  const shipped = new Set(faces.map((face) => face.path));
  const fonts: Record<string, Record<string, string>> = {};
  for (const { family, style, path } of faces) (fonts[family] ??= {})[style] = path;
  maker.setFonts(fonts);
  maker.setUrlAccessPolicy(() => false);
  maker.setLocalAccessPolicy((path) => shipped.has(path));
  return maker;
}

function pageContent(page: PageDescription, faces: readonly Face[], breakBefore: boolean): Content[] {
  const content: Content[] = [{ text: '', absolutePosition: { x: 0, y: 0 }, ...(breakBefore ? { pageBreak: 'before' as const } : {}) }];
  let canvas: CanvasElement[] = [];
  const flush = () => {
    if (canvas.length > 0) content.push({ canvas, absolutePosition: { x: 0, y: 0 } });
    canvas = [];
  };
  for (const item of page.items) {
    if (item.kind === 'path') canvas.push(...vectors(item));
    else {
      flush();
      content.push(textContent(item, faces, page));
    }
  }
  flush();
  return content;
}

function vectors(item: PagePath): CanvasElement[] {
  const rings = item.rings.filter((ring) => ring.length > 1);
  if (rings.length === 0) return [];
  const shared = { lineJoin: 'round' as const, lineCap: 'butt' as const, ...(item.fill === undefined ? {} : { color: item.fill }) };
  const look = item.strokeMm === undefined ? shared : {
    ...shared, lineWidth: Math.max(pt(item.strokeMm), 0.01), lineColor: item.stroke ?? '#000000',
    ...(item.dashMm ? { dash: { length: pt(item.dashMm[0]), space: pt(item.dashMm[1] ?? item.dashMm[0]) } } : {}),
  };
  if (item.fill === undefined && item.strokeMm === undefined) return [];
  if (rings.length === 1) return [{ type: 'polyline', points: rings[0].map(toPoints), closePath: item.closed, ...look }];
  // One path for all rings; the package's types do not know its own path element.
  const turned = item.fill === undefined ? rings : evenOddAsNonZero(rings);
  const d = turned.map((ring) => `M${ring.map((p) => `${pt(p.x)} ${pt(p.y)}`).join('L')}${item.closed ? 'Z' : ''}`).join('');
  return [{ type: 'path', d, ...look } as unknown as CanvasElement];
}

function textContent(item: PageText, faces: readonly Face[], page: PageDescription): Content {
  const style: Style = item.bold ? 'bold' : 'normal';
  const runs = splitByFace(item.text, faces.filter((face) => face.style === style));
  const size = item.sizeMm * PT_PER_MM;
  const width = runs.reduce((sum, { text, face }) => sum + (face.family === 'Work Sans' && [...text].every(isCommon) ? textWidth(text, size, item.bold) : face.font().getAdvanceWidth(text, size)), 0);
  const share = { left: 0, middle: 0.5, right: 1 }[item.align];
  if (item.turnDeg) return turnedText(item, runs.map((run) => run.text).join(''), width * share, page);
  return {
    text: runs.map(({ text, face }) => ({ text, font: face.family })),
    fontSize: size, bold: item.bold === true, noWrap: true, preserveLeadingSpaces: true,
    absolutePosition: { x: item.at.x * PT_PER_MM - width * share, y: item.at.y * PT_PER_MM - ASCENDER * size },
  };
}

/** The layout knows level lines only; a turned word goes in as a drawing, still as text. */
function turnedText(item: PageText, text: string, back: number, page: PageDescription): Content {
  const width = page.widthMm * PT_PER_MM, height = page.heightMm * PT_PER_MM;
  const x = item.at.x * PT_PER_MM, y = item.at.y * PT_PER_MM;
  const escaped = text.replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;');
  return {
    svg: `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}" viewBox="0 0 ${width} ${height}"><text transform="translate(${x} ${y}) rotate(${item.turnDeg})" x="${-back}" y="0" font-family="Work Sans" font-size="${item.sizeMm * PT_PER_MM}" font-weight="${item.bold ? 'bold' : 'normal'}" fill="${INK}">${escaped}</text></svg>`,
    width, height, absolutePosition: { x: 0, y: 0 },
  };
}

/** Runs of characters that one face has, the main one first. */
function splitByFace(text: string, faces: readonly Face[]): { text: string; face: Face }[] {
  const runs: { text: string; face: Face }[] = [];
  for (const character of text) {
    const face = isCommon(character) ? faces[0] : faces.find(({ font }) => font().hasChar(character));
    const last = runs.at(-1);
    if (last && last.face === (face ?? faces[0])) last.text += face ? character : '?';
    else runs.push({ text: face ? character : '?', face: face ?? faces[0] });
  }
  return runs;
}

function toPoints(p: { x: number; y: number }): { x: number; y: number } {
  return { x: pt(p.x), y: pt(p.y) };
}

function pt(mm: number): number {
  return Math.round(mm * PT_PER_MM * 100) / 100;
}
