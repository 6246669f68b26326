/**
 * Page descriptions as PDF 1.7 (ISO 32000-1), by pdfmake. On the server only: it reads the fonts that are shipped with the application.
 *
 * Coordinates are rounded to 0.01 pt (0.0035 mm). The document asks not to be scaled (/PrintScaling /None, §12.2) and to show its title. Nothing is ever fetched:
 * the fonts are handed over as bytes, and addresses and local files are refused. All pages have one size. Characters that Work Sans does not have are
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
import { sfntOf } from './woff.ts';
import type { PageDescription, PageDocument, PagePath, PageText } from './types.ts';

const PT_PER_MM = POINTS_PER_INCH / MM_PER_INCH;
const FAMILIES = { 'Work Sans': 'latin', 'Work Sans Ext': 'latin-ext' } as const;
type Family = keyof typeof FAMILIES;
const STYLES = { normal: 400, bold: 600 } as const;
type Style = keyof typeof STYLES;

interface Face { family: Family; style: Style; name: string; bytes: Buffer; /** Parsed when first asked for: most documents need no more than the widths in text-width.ts. */ font(): Font }
/** Of Work Sans, in parts of the size. */
const ASCENDER = 0.93;
interface PdfMaker {
  virtualfs: { existsSync(name: string): boolean; writeFileSync(name: string, bytes: Buffer): void };
  setFonts(fonts: Record<string, Record<string, string>>): void;
  setUrlAccessPolicy(allow: (url: string) => boolean): void;
  setLocalAccessPolicy(allow: (path: string) => boolean): void;
  createPdf(definition: TDocumentDefinitions, options?: object): PdfOutput;
}
interface PdfOutput { getStream(): Promise<PdfStream>; getBuffer(): Promise<Buffer> }
/** What is used of the document that pdfmake has drawn and not yet ended. */
interface PdfStream {
  _root: { data: { ViewerPreferences?: { data: Record<string, unknown> } } };
  _font: unknown;
  provideFont(family: string, bold: boolean, italics: boolean): unknown;
  switchToPage(index: number): void;
  save(): void;
  restore(): void;
  rotate(angleDeg: number, options: { origin: [number, number] }): void;
  fontSize(size: number): void;
  fillColor(colour: string): void;
  text(text: string, x: number, y: number, options: { lineBreak: false }): void;
}

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
  }, { bufferPages: true });
  const stream = await output.getStream();
  document.pages.forEach((page, i) => drawTurned(stream, i, page, faces));
  const preferences = stream._root.data.ViewerPreferences;
  if (!preferences) throw new Error('The PDF writer made no viewer preferences; it would be scaled by some printers.');
  preferences.data.PrintScaling = 'None';
  return new Uint8Array(await output.getBuffer());
}

/** For one document: the engine keeps no state. */
function loadFaces(): Face[] {
  const names = Object.keys(FAMILIES) as Family[], styles = Object.keys(STYLES) as Style[];
  return names.flatMap((family) => styles.map((style) => {
    const name = `work-sans-${FAMILIES[family]}-${STYLES[style]}-normal.woff`;
    const bytes = sfntOf(readFileSync(fileURLToPath(import.meta.resolve(`@fontsource/work-sans/files/${name}`))));
    let parsed: Font | undefined;
    return { family, style, name, bytes, font: () => (parsed ??= opentype.parse(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength) as ArrayBuffer)) };
  }));
}

/** The package is one object for the whole process: it is always set to the same values. */
function preparedMaker(faces: readonly Face[]): PdfMaker {
  const maker = pdfmake as unknown as PdfMaker;
  for (const { name, bytes } of faces) if (!maker.virtualfs.existsSync(name)) maker.virtualfs.writeFileSync(name, bytes);
  const fonts: Record<string, Record<string, string>> = {};
  for (const { family, style, name } of faces) (fonts[family] ??= {})[style] = name;
  maker.setFonts(fonts);
  maker.setUrlAccessPolicy(() => false);
  maker.setLocalAccessPolicy(() => false);
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
    else if (!item.turnDeg) {
      flush();
      content.push(textContent(item, faces));
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

function textContent(item: PageText, faces: readonly Face[]): Content {
  const { runs, width, size } = measured(item, faces);
  return {
    text: runs.map(({ text, face }) => ({ text, font: face.family })),
    fontSize: size, bold: item.bold === true, noWrap: true, preserveLeadingSpaces: true,
    absolutePosition: { x: item.at.x * PT_PER_MM - width * SHARE[item.align], y: item.at.y * PT_PER_MM - ASCENDER * size },
  };
}

const SHARE = { left: 0, middle: 0.5, right: 1 };

function measured(item: PageText, faces: readonly Face[]): { runs: { text: string; face: Face; width: number }[]; width: number; size: number } {
  const style: Style = item.bold ? 'bold' : 'normal';
  const size = item.sizeMm * PT_PER_MM;
  const runs = splitByFace(item.text, faces.filter((face) => face.style === style)).map(({ text, face }) => ({
    text, face, width: face.family === 'Work Sans' && [...text].every(isCommon) ? textWidth(text, size, item.bold) : face.font().getAdvanceWidth(text, size),
  }));
  return { runs, width: runs.reduce((sum, run) => sum + run.width, 0), size };
}

/** The layout knows level lines only: turned words are written on the finished pages. */
function drawTurned(stream: PdfStream, index: number, page: PageDescription, faces: readonly Face[]): void {
  const turned = page.items.filter((item): item is PageText => item.kind === 'text' && Boolean(item.turnDeg));
  if (turned.length === 0) return;
  stream.switchToPage(index);
  for (const item of turned) {
    const { runs, width, size } = measured(item, faces);
    const at = { x: item.at.x * PT_PER_MM, y: item.at.y * PT_PER_MM };
    let x = at.x - width * SHARE[item.align];
    stream.save();
    stream.rotate(item.turnDeg ?? 0, { origin: [at.x, at.y] });
    stream.fillColor(INK);
    for (const run of runs) {
      stream._font = stream.provideFont(run.face.family, item.bold === true, false);
      stream.fontSize(size);
      stream.text(run.text, x, at.y - ASCENDER * size, { lineBreak: false });
      x += run.width;
    }
    stream.restore();
  }
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
