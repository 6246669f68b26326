/**
 * What kind of picture a file is and how large, told from its header alone: nothing is decoded, so a small file that claims to
 * be huge costs nothing.
 *
 * Input: the bytes of the file; not mutated. Output: type, size in pixels after the picture is turned upright, and the density
 * the file states. Throws ReadingError: `unsupported-type` for what is none of the six kinds, `damaged` for a header that breaks
 * off or makes no sense, `too-large` beyond MAX_FILE_BYTES or MAX_PIXELS. Cost: one walk over the file's segments.
 * Sources: ISO/IEC 15948 (PNG), ITU-T T.81 and T.871 (JPEG, JFIF), RFC 9649 (WebP), TIFF 6.0, GIF89a.
 */
import { readExif, type Density } from './exif.ts';
import { damaged, ReadingError, unsupportedType } from './reading-error.ts';

export type PictureType = 'png' | 'jpeg' | 'webp' | 'bmp' | 'tiff' | 'gif';

export interface PictureHeader {
  type: PictureType;
  /** As stored, before turning upright. */
  storedWidthPx: number;
  storedHeightPx: number;
  /** After turning upright, as Reading.widthPx. */
  widthPx: number;
  heightPx: number;
  /** EXIF orientation, 1 to 8. */
  orientation: number;
  /** Dots per inch along the upright picture's axes; null where the file states none that can be believed. */
  dpi: Density | null;
}

export const MAX_FILE_BYTES = 25 * 1024 * 1024;
export const MAX_PIXELS = 60_000_000;
/** A header may claim a strip of one pixel's height; no scanner makes such, and buffers of lines would grow with it. */
const MAX_SIDE_PX = 65_500;

/** Densities that programs write without having measured anything: screens and cameras. */
const MEANINGLESS_DPI = [72, 96];
/** pHYs counts whole dots per metre, so that 72 dpi comes back as 71.98 or 72.01. */
const DPI_ROUNDING = 0.3;
const SENSIBLE_DPI = { least: 50, most: 10_000 };

interface Facts {
  type: PictureType;
  width: number;
  height: number;
  orientation?: number;
  /** Every density that the file states, the most trusted first. */
  densities: (Density | null | undefined)[];
  byCamera?: boolean;
}

export function probePicture(file: Uint8Array): PictureHeader {
  if (file.length > MAX_FILE_BYTES) throw new ReadingError('too-large', `The file has ${megabytes(file.length)} MB; at most ${megabytes(MAX_FILE_BYTES)} MB can be read. Save it with less resolution, or as JPEG.`);
  const facts = readFacts(file);
  const { width, height } = facts;
  if (!(width > 0) || !(height > 0)) throw damaged();
  if (width * height > MAX_PIXELS || Math.max(width, height) > MAX_SIDE_PX) {
    throw new ReadingError('too-large', `The picture has ${width} × ${height} pixels; at most ${MAX_PIXELS / 1e6} million pixels can be read. Scan at 300 to 600 dpi, or make the picture smaller.`);
  }
  const orientation = facts.orientation ?? 1;
  const turned = orientation >= 5;
  const dpi = facts.byCamera ? null : believable(facts.densities);
  return {
    type: facts.type,
    storedWidthPx: width, storedHeightPx: height,
    widthPx: turned ? height : width, heightPx: turned ? width : height,
    orientation,
    dpi: dpi && turned ? { x: dpi.y, y: dpi.x } : dpi,
  };
}

const megabytes = (bytes: number) => Math.round((bytes / 1024 / 1024) * 10) / 10;

function believable(densities: Facts['densities']): Density | null {
  const sensible = (dpi: number) => dpi >= SENSIBLE_DPI.least && dpi <= SENSIBLE_DPI.most && !MEANINGLESS_DPI.some((m) => Math.abs(dpi - m) < DPI_ROUNDING);
  return densities.find((d): d is Density => !!d && sensible(d.x) && sensible(d.y)) ?? null;
}

function readFacts(file: Uint8Array): Facts {
  const view = new DataView(file.buffer, file.byteOffset, file.byteLength);
  const starts = (...bytes: number[]) => bytes.every((b, i) => file[i] === b);
  try {
    if (starts(0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a)) return pngFacts(view);
    if (starts(0xff, 0xd8, 0xff)) return jpegFacts(file, view);
    if (ascii(file, 0, 4) === 'RIFF' && ascii(file, 8, 12) === 'WEBP') return webpFacts(file, view);
    if (starts(0x42, 0x4d)) return bmpFacts(view);
    if (starts(0x49, 0x49, 42, 0) || starts(0x4d, 0x4d, 0, 42)) return tiffFacts(file);
    if (ascii(file, 0, 6) === 'GIF87a' || ascii(file, 0, 6) === 'GIF89a') return { type: 'gif', width: view.getUint16(6, true), height: view.getUint16(8, true), densities: [] };
  } catch (error) {
    // A DataView throws RangeError at the end of the bytes: the header breaks off.
    if (error instanceof RangeError) throw damaged(error);
    throw error;
  }
  throw unsupportedType();
}

function ascii(file: Uint8Array, from: number, to: number): string {
  return String.fromCharCode(...file.subarray(from, to));
}

function pngFacts(view: DataView): Facts {
  if (view.getUint32(12) !== 0x49484452) throw damaged();
  const facts: Facts = { type: 'png', width: view.getUint32(16), height: view.getUint32(20), densities: [] };
  for (let at = 33; at + 12 <= view.byteLength;) {
    const length = view.getUint32(at), name = view.getUint32(at + 4);
    if (at + 8 + length > view.byteLength) break;
    if (name === 0x70485973 && length >= 9 && view.getUint8(at + 16) === 1) {
      facts.densities.push({ x: view.getUint32(at + 8) * 0.0254, y: view.getUint32(at + 12) * 0.0254 });
    } else if (name === 0x65584966) addExif(facts, new Uint8Array(view.buffer, view.byteOffset + at + 8, length));
    else if (name === 0x49454e44) break;
    at += 12 + length;
  }
  return facts;
}

function addExif(facts: Facts, block: Uint8Array): void {
  const exif = readExif(block);
  facts.orientation = exif.orientation;
  facts.byCamera = exif.byCamera;
  facts.densities.push(exif.density);
}

function jpegFacts(file: Uint8Array, view: DataView): Facts {
  const facts: Facts = { type: 'jpeg', width: 0, height: 0, densities: [] };
  for (let at = 2; ;) {
    // Segments may be set apart by fill bytes.
    while (view.getUint8(at) === 0xff && view.getUint8(at + 1) === 0xff) at++;
    if (view.getUint8(at) !== 0xff) throw damaged();
    const marker = view.getUint8(at + 1);
    if (marker === 0xd9 || marker === 0xda) throw damaged();
    if (marker === 0x01 || (marker >= 0xd0 && marker <= 0xd7)) { at += 2; continue; }
    const length = view.getUint16(at + 2), body = at + 4;
    if (length < 2) throw damaged();
    const isFrame = marker >= 0xc0 && marker <= 0xcf && marker !== 0xc4 && marker !== 0xc8 && marker !== 0xcc;
    if (isFrame) {
      facts.height = view.getUint16(body + 1);
      facts.width = view.getUint16(body + 3);
      return facts;
    }
    if (marker === 0xe0 && ascii(file, body, body + 4) === 'JFIF') facts.densities.push(jfifDensity(view, body));
    if (marker === 0xe1 && ascii(file, body, body + 4) === 'Exif') addExif(facts, file.subarray(body + 6, at + 2 + length));
    at += 2 + length;
  }
}

function jfifDensity(view: DataView, body: number): Density | null {
  const unit = view.getUint8(body + 7);
  const perInch = unit === 1 ? 1 : unit === 2 ? 2.54 : 0;
  const x = view.getUint16(body + 8) * perInch, y = view.getUint16(body + 10) * perInch;
  return x > 0 && y > 0 ? { x, y } : null;
}

function webpFacts(file: Uint8Array, view: DataView): Facts {
  const facts: Facts = { type: 'webp', width: 0, height: 0, densities: [] };
  for (let at = 12; at + 8 <= view.byteLength;) {
    const name = ascii(file, at, at + 4), length = view.getUint32(at + 4, true), body = at + 8;
    if (name === 'VP8X') {
      facts.width = 1 + (view.getUint32(body + 4, true) & 0xffffff);
      facts.height = 1 + (view.getUint32(body + 7, true) & 0xffffff);
    } else if (name === 'VP8 ' && facts.width === 0) {
      facts.width = view.getUint16(body + 6, true) & 0x3fff;
      facts.height = view.getUint16(body + 8, true) & 0x3fff;
    } else if (name === 'VP8L' && facts.width === 0) {
      const bits = view.getUint32(body + 1, true);
      facts.width = 1 + (bits & 0x3fff);
      facts.height = 1 + ((bits >>> 14) & 0x3fff);
    } else if (name === 'EXIF') {
      // Some writers keep JPEG's own introduction before the block.
      const block = file.subarray(body, body + length);
      addExif(facts, ascii(block, 0, 4) === 'Exif' ? block.subarray(6) : block);
    }
    at = body + length + (length & 1);
  }
  return facts;
}

function bmpFacts(view: DataView): Facts {
  const headerSize = view.getUint32(14, true);
  if (headerSize === 12) return { type: 'bmp', width: view.getUint16(18, true), height: view.getUint16(20, true), densities: [] };
  if (headerSize < 40 || headerSize > 1024) throw damaged();
  // A height below zero means lines from top to bottom.
  const width = view.getInt32(18, true), height = Math.abs(view.getInt32(22, true));
  const x = view.getInt32(38, true) * 0.0254, y = view.getInt32(42, true) * 0.0254;
  return { type: 'bmp', width, height, densities: [x > 0 && y > 0 ? { x, y } : null] };
}

function tiffFacts(file: Uint8Array): Facts {
  const exif = readExif(file);
  if (exif.widthPx === undefined || exif.heightPx === undefined) throw damaged();
  return { type: 'tiff', width: exif.widthPx, height: exif.heightPx, orientation: exif.orientation, densities: [exif.density], byCamera: exif.byCamera };
}
