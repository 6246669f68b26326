/** Draws a sheet of sentiments as a scanner would see it: words set from an open font's own outlines, with paper grain if wanted. */
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { crc32 } from 'node:zlib';
import { Resvg } from '@resvg/resvg-js';
import opentype from 'opentype.js';

export interface SheetWords { words: string; /** Left end of the baseline, mm. */ x: number; y: number; sizeMm: number; font?: string }
interface Box { x: number; y: number; w: number; h: number }
export interface SheetOptions { widthMm: number; heightMm: number; dpi: number; /** Written into the file; default as drawn; null leaves it out. */ statedDpi?: number | null; mirrored?: boolean; grain?: number; ink?: string; paper?: string }

const require = createRequire(import.meta.url);
function loadFont(name: string) {
  const bytes = readFileSync(require.resolve(`@fontsource/${name}/files/${name}-latin-400-normal.woff`));
  return opentype.parse(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength));
}

/** Glyph after glyph: shaping rules of some fonts are more than the parser knows. */
function setWords({ words, x, y, sizeMm, font: name = 'lora' }: SheetWords) {
  const font = loadFont(name);
  let pen = x, data = '';
  const box = { x1: Infinity, y1: Infinity, x2: -Infinity, y2: -Infinity };
  for (const character of words) {
    const glyph = font.charToGlyph(character), path = glyph.getPath(pen, y, sizeMm);
    pen += ((glyph.advanceWidth ?? 0) / font.unitsPerEm) * sizeMm;
    if (path.commands.length === 0) continue;
    const { x1, y1, x2, y2 } = path.getBoundingBox();
    Object.assign(box, { x1: Math.min(box.x1, x1), y1: Math.min(box.y1, y1), x2: Math.max(box.x2, x2), y2: Math.max(box.y2, y2) });
    data += path.commands.map(drawn).join('');
  }
  return { data, boxMm: { x: box.x1, y: box.y1, w: box.x2 - box.x1, h: box.y2 - box.y1 } };
}

const drawn = (command: opentype.PathCommand): string => (
  command.type === 'Z' ? 'Z'
    : command.type === 'C' ? `C${command.x1} ${command.y1} ${command.x2} ${command.y2} ${command.x} ${command.y}`
    : command.type === 'Q' ? `Q${command.x1} ${command.y1} ${command.x} ${command.y}`
    : `${command.type}${command.x} ${command.y}`
);

/** The PNG, and the box of each word's ink in mm as the font's own outlines give it. */
export function drawSheet(words: SheetWords[], options: SheetOptions): { png: Buffer; boxesMm: Box[] } {
  const { widthMm, heightMm, dpi, ink = '#1b2233', paper = '#ffffff' } = options;
  const set = words.map(setWords);
  const mirror = options.mirrored ? `transform="translate(${widthMm} 0) scale(-1 1)"` : '';
  const noise = options.grain
    ? `<filter id="g" x="0" y="0" width="100%" height="100%"><feTurbulence type="fractalNoise" baseFrequency="0.8" numOctaves="2" seed="7"/><feColorMatrix values="0 0 0 0 0.4  0 0 0 0 0.35  0 0 0 0 0.3  ${options.grain} 0 0 0 0"/></filter><rect width="100%" height="100%" filter="url(#g)"/>`
    : '';
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${widthMm} ${heightMm}"><rect width="100%" height="100%" fill="${paper}"/>${noise}<g ${mirror} fill="${ink}">${set.map(({ data }) => `<path d="${data}"/>`).join('')}</g></svg>`;
  const png = Buffer.from(new Resvg(svg, { fitTo: { mode: 'width', value: Math.round((widthMm / 25.4) * dpi) } }).render().asPng());
  const stated = options.statedDpi === undefined ? dpi : options.statedDpi;
  return { png: stated === null ? png : withDensity(png, stated), boxesMm: set.map(({ boxMm }) => boxMm) };
}

const DESK = { marginMm: 22, colour: '#6a5d50', turnDeg: 3.5, skewDeg: 2 };

/** The same sheet lying askew on a darker desk, seen a little from the side; with the places of its corners, px, in the order in which they are asked for. */
export function drawOnDesk(words: SheetWords[], options: SheetOptions): { png: Buffer; boxesMm: Box[]; cornersPx: { x: number; y: number }[] } {
  const { widthMm: w, heightMm: h, dpi, ink = '#1b2233', paper = '#fdfcf8' } = options;
  const set = words.map(setWords), m = DESK.marginMm, pxPerMm = dpi / 25.4;
  const rad = Math.PI / 180, [sin, cos, tan] = [Math.sin(DESK.turnDeg * rad), Math.cos(DESK.turnDeg * rad), Math.tan(DESK.skewDeg * rad)];
  // Turn after skew, about the sheet's middle; as SVG's matrix(a b c d e f).
  const [a, b, c, d] = [cos, sin, cos * tan - sin, sin * tan + cos];
  const [e, f] = [m + w / 2 - (a * w) / 2 - (c * h) / 2, m + h / 2 - (b * w) / 2 - (d * h) / 2];
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${w + 2 * m} ${h + 2 * m}"><rect width="100%" height="100%" fill="${DESK.colour}"/><g transform="matrix(${a} ${b} ${c} ${d} ${e} ${f})"><rect width="${w}" height="${h}" fill="${paper}"/><g fill="${ink}">${set.map(({ data }) => `<path d="${data}"/>`).join('')}</g></g></svg>`;
  const png = Buffer.from(new Resvg(svg, { fitTo: { mode: 'width', value: Math.round((w + 2 * m) * pxPerMm) } }).render().asPng());
  const place = (x: number, y: number) => ({ x: (a * x + c * y + e) * pxPerMm, y: (b * x + d * y + f) * pxPerMm });
  return { png, boxesMm: set.map(({ boxMm }) => boxMm), cornersPx: [place(0, 0), place(w, 0), place(w, h), place(0, h)] };
}

/** ISO/IEC 15948 §11.3.4.3: pHYs, dots per metre, after IHDR. */
function withDensity(png: Buffer, dpi: number): Buffer {
  const body = Buffer.alloc(13);
  body.write('pHYs', 0, 'latin1');
  body.writeUInt32BE(Math.round(dpi / 0.0254), 4);
  body.writeUInt32BE(Math.round(dpi / 0.0254), 8);
  body.writeUInt8(1, 12);
  const chunk = Buffer.alloc(4 + body.length + 4);
  chunk.writeUInt32BE(9, 0);
  body.copy(chunk, 4);
  chunk.writeUInt32BE(crc32(body), 4 + body.length);
  const afterHeader = 8 + 25;
  return Buffer.concat([png.subarray(0, afterHeader), chunk, png.subarray(afterHeader)]);
}
