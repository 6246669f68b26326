/**
 * The few facts of an EXIF block that matter here: which way up the picture is, its density, and whether a camera took it.
 *
 * Input: the bytes of a TIFF structure (JPEG's APP1 after "Exif\0\0", PNG's eXIf, WebP's EXIF, or a whole TIFF file). Nothing is mutated.
 * Whatever is missing, out of range or not understood is left out; a block that lies about its lengths never throws.
 * Cost: at most MAX_ENTRIES entries of two directories. Source: CIPA DC-008-2019 (Exif 2.32) and TIFF revision 6.0.
 */

export interface Density { x: number; y: number }
export interface ExifFacts {
  widthPx?: number;
  heightPx?: number;
  /** 1 to 8; 1 where nothing sensible is said. */
  orientation: number;
  /** Dots per inch, as stored: before the picture is turned upright. */
  density: Density | null;
  /** Exposure or lens facts are there: the density was made up by a camera. */
  byCamera: boolean;
}

const MAX_ENTRIES = 512;
const TAG = { width: 0x100, height: 0x101, orientation: 0x112, xResolution: 0x11a, yResolution: 0x11b, unit: 0x128, exifDirectory: 0x8769 };
/** ExposureTime, FNumber, PhotographicSensitivity, FocalLength: scanners and drawing programs write none of them. */
const CAMERA_TAGS = [0x829a, 0x829d, 0x8827, 0x920a];
const TYPE_SIZE: Record<number, number> = { 1: 1, 2: 1, 3: 2, 4: 4, 5: 8, 7: 1, 9: 4, 10: 8 };

export function readExif(tiff: Uint8Array): ExifFacts {
  const none: ExifFacts = { orientation: 1, density: null, byCamera: false };
  if (tiff.length < 8) return none;
  const view = new DataView(tiff.buffer, tiff.byteOffset, tiff.byteLength);
  const little = view.getUint16(0) === 0x4949;
  if (!little && view.getUint16(0) !== 0x4d4d) return none;
  if (view.getUint16(2, little) !== 42) return none;

  const main = readDirectory(view, view.getUint32(4, little), little);
  const exifAt = main.get(TAG.exifDirectory);
  const exif = exifAt === undefined ? new Map<number, number>() : readDirectory(view, exifAt, little);
  const orientation = main.get(TAG.orientation) ?? 1;
  return {
    widthPx: main.get(TAG.width),
    heightPx: main.get(TAG.height),
    orientation: Number.isInteger(orientation) && orientation >= 1 && orientation <= 8 ? orientation : 1,
    density: densityOf(main),
    byCamera: CAMERA_TAGS.some((tag) => main.has(tag) || exif.has(tag)),
  };
}

function densityOf(directory: Map<number, number>): Density | null {
  const x = directory.get(TAG.xResolution), y = directory.get(TAG.yResolution) ?? x;
  // Inches where no unit is written, as both standards say; 1 means that only the ratio of x and y is meant.
  const unit = directory.get(TAG.unit) ?? 2;
  if (x === undefined || y === undefined || !(x > 0) || !(y > 0) || (unit !== 2 && unit !== 3)) return null;
  const perInch = unit === 3 ? 2.54 : 1;
  return { x: x * perInch, y: y * perInch };
}

/** First value of each entry, as a number. */
function readDirectory(view: DataView, at: number, little: boolean): Map<number, number> {
  const found = new Map<number, number>();
  if (at + 2 > view.byteLength) return found;
  const count = Math.min(view.getUint16(at, little), MAX_ENTRIES);
  for (let i = 0; i < count; i++) {
    const entry = at + 2 + 12 * i;
    if (entry + 12 > view.byteLength) break;
    const value = readValue(view, entry, little);
    if (value !== undefined) found.set(view.getUint16(entry, little), value);
  }
  return found;
}

function readValue(view: DataView, entry: number, little: boolean): number | undefined {
  const type = view.getUint16(entry + 2, little), count = view.getUint32(entry + 4, little);
  const size = TYPE_SIZE[type];
  if (size === undefined || count === 0) return undefined;
  const at = size * count <= 4 ? entry + 8 : view.getUint32(entry + 8, little);
  if (at + size > view.byteLength) return undefined;
  switch (type) {
    case 3: return view.getUint16(at, little);
    case 4: return view.getUint32(at, little);
    case 5: {
      const below = view.getUint32(at + 4, little);
      return below === 0 ? undefined : view.getUint32(at, little) / below;
    }
    default: return view.getUint8(at);
  }
}
