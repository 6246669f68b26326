/**
 * A picture file → its sentiments in mm: decoding, scale, ink from paper, connected pieces with outlines, grouping.
 *
 * Input: the file's bytes and what the person said; not mutated. Output: a Reading; see types.ts for the exact meaning of its places.
 * Rejects with ReadingError. Runs on the calling thread. Memory: 4 bytes a pixel while decoding, then 2.
 */
import type { Control } from '../control.ts';
import { signedArea } from '../geometry/ring.ts';
import type { Point } from '../geometry/types.ts';
import { decodePicture, type Pixels } from './decode.ts';
import { findParts } from './find-parts.ts';
import { NO_CORRECTIONS, regroup, withScale } from './grouping.ts';
import { localScale, multiply, type Homography } from './homography.ts';
import { mapInk, type InkMap } from './ink-map.ts';
import { findPhotoPage, type Brightness } from './markers.ts';
import { findSheet } from './find-sheet.ts';
import { storedPlace, turnUpright, uprightPlace, uprightSize, type Turning } from './orientation.ts';
import { estimatePaper, luminance } from './paper.ts';
import { probePicture, type PictureHeader } from './probe.ts';
import { noInk } from './reading-error.ts';
import { insetPolygon, regionWithin, type Region } from './region.ts';
import { fileScale, givenScale, type Scale } from './scale.ts';
import type { Reading, ReadOptions } from './types.ts';

type Progress = (done: number, stage: string) => void;
/** What is read, upright picture px; null for everything. */
interface Surface { scale: Scale | null; polygon: Point[] | null }
interface Separated { map: InkMap; surface: Surface; turning: Turning; foundCorners: Point[] | null }

/** Within this of a sheet's edge its own shadow shows; a stamp's ink does not reach so far out. */
const SHEET_EDGE_MM = 0.5;

export async function readStampSheet(file: Uint8Array, options: ReadOptions, control?: Control): Promise<Reading> {
  const progress: Progress = (done, stage) => control?.onProgress?.(done, stage);
  const header = probePicture(file);
  const given = givenScale(options);
  progress(0, 'decoding');
  const { map, surface, turning, foundCorners } = await separateInk(file, header, given, options, progress);

  progress(0.6, 'finding ink');
  const upright = uprightSize(turning);
  const { scale, polygon } = surface;
  const mmPerPx = scale && localScale(scale.pxToMm, { x: upright.width / 2, y: upright.height / 2 });
  const parts = findParts({ ...map, ...upright, values: turnUpright(map.values, turning) }, polygon, mmPerPx);
  if (parts.length === 0) throw noInk();

  progress(0.85, 'grouping');
  const bare: Reading = {
    widthPx: upright.width, heightPx: upright.height, pxToMm: null, mmPerPx: null, scaleSource: null,
    groupingGapMm: null, groupingGapPx: 0, parts, links: [], sentiments: [], warnings: [],
    ...(foundCorners ? { foundCornersPx: foundCorners } : {}),
  };
  const scaled = scale ? withScale(bare, scale.pxToMm, scale.source, scale.source === 'sheet' ? options.sheet?.cornersPx : undefined) : bare;
  const warnings = warningsOf(scale, mmPerPx, foundCorners !== null);
  const reading = regroup({ ...scaled, warnings }, scale ? (options.groupingGapMm ?? 'auto') : 'auto', options.corrections ?? NO_CORRECTIONS);
  if (reading.sentiments.length === 0 && (options.corrections?.setAside.length ?? 0) === 0) throw noInk();
  progress(1, 'done');
  return reading;
}

/** Above this a letter's stroke is hardly a pixel wide: 125 dpi. */
const COARSE_MM_PER_PX = 25.4 / 125;

function warningsOf(scale: Scale | null, mmPerPx: number | null, cornersFound: boolean): Reading['warnings'] {
  const warnings: Reading['warnings'] = [];
  if (!scale && cornersFound) warnings.push({ code: 'no-scale', message: 'The sheet’s corners were found, but not its size. Type the sheet’s width and height, and every sentiment has its size.' });
  else if (!scale) warnings.push({ code: 'no-scale', message: 'The picture does not say its scale, so sizes are not known yet. Type the scan’s dpi, or drag a ruler over a length that you know.' });
  if (mmPerPx !== null && mmPerPx > COARSE_MM_PER_PX) {
    warnings.push({ code: 'coarse-picture', message: `The picture has only ${Math.round(25.4 / mmPerPx)} dots per inch, so sizes are good to about ${mmPerPx.toFixed(1)} mm. Scan at 300 dpi, or take the photograph from nearer.` });
  }
  return warnings;
}

/** White ink on a transparent ground is bare on white paper: then it is laid on black. */
async function separateInk(file: Uint8Array, header: PictureHeader, given: Scale | null, options: ReadOptions, progress: Progress): Promise<Separated> {
  const onWhite = await inkOn(file, header, WHITE, given, options, progress);
  if (onWhite !== 'transparent') return onWhite;
  const onBlack = await inkOn(file, header, BLACK, given, options, progress);
  if (onBlack === 'transparent') throw noInk();
  return onBlack;
}
const WHITE = 255, BLACK = 0;

/** The pixels are let go of as soon as the map is made. Answers `transparent` where there is no ink but another ground could bring some out. */
async function inkOn(file: Uint8Array, header: PictureHeader, ground: number, given: Scale | null, options: ReadOptions, progress: Progress): Promise<Separated | 'transparent'> {
  const pixels = await decodePicture(file, header, ground);
  const turning: Turning = { width: pixels.width, height: pixels.height, orientation: header.orientation, mirrored: options.mirrored ?? false };
  progress(0.3, 'looking for the sheet');
  let surface = await findSurface(pixels, turning, given, fileScale(header.dpi), options);
  let region = regionOf(pixels, turning, surface.polygon);
  const sheet = surface.scale?.source === 'sheet' ? null : findSheet(pixels, region);
  if (sheet) {
    surface = { ...surface, polygon: sheet.polygon.map((p) => uprightPlace(turning, p)) };
    region = regionOf(pixels, turning, surface.polygon);
  }
  progress(0.4, 'levelling light');
  const map = mapInk(pixels, estimatePaper(pixels, region), region);
  if (!map && pixels.transparent) return 'transparent';
  if (!map) throw noInk();
  return { map, surface, turning, foundCorners: sheet?.corners ? fromTopLeft(sheet.corners.map((p) => uprightPlace(turning, p))) : null };
}

function regionOf(pixels: Pixels, turning: Turning, polygon: readonly Point[] | null): Region {
  return regionWithin(pixels.width, pixels.height, polygon && polygon.map((p) => storedPlace(turning, p)));
}

/** Clockwise as seen, the corner nearest to the picture's top left first. */
function fromTopLeft(corners: readonly Point[]): Point[] {
  const clockwise = signedArea([...corners]) > 0 ? [...corners] : [...corners].reverse();
  const first = clockwise.reduce((best, p, i) => (p.x + p.y < clockwise[best].x + clockwise[best].y ? i : best), 0);
  return [...clockwise.slice(first), ...clockwise.slice(0, first)];
}

async function findSurface(pixels: Pixels, turning: Turning, given: Scale | null, fromFile: Scale | null, options: ReadOptions): Promise<Surface> {
  if (given?.source === 'sheet' && options.sheet) {
    return { scale: given, polygon: insideEdge(options.sheet.cornersPx, given.pxToMm) };
  }
  if (given) return { scale: given, polygon: null };
  const upright = { ...turning, mirrored: false }, size = uprightSize(upright);
  const page = await findPhotoPage(brightness(pixels, upright), options.photoPageScale ?? { x: 1, y: 1 });
  if (!page) return { scale: fromFile, polygon: null };
  if (!turning.mirrored) return { scale: { pxToMm: page.pxToMm, source: 'photo-page' }, polygon: page.roomPx };
  // Seen in a mirror the markers are none: they are found before flipping, and picture and sheet are then flipped alike.
  const flip = (width: number): Homography => [-1, 0, width, 0, 1, 0, 0, 0, 1];
  const pxToMm = multiply(flip(page.roomMm.w), multiply(page.pxToMm, flip(size.width)));
  return { scale: { pxToMm, source: 'photo-page' }, polygon: page.roomPx.map((p) => ({ x: size.width - p.x, y: p.y })).reverse() };
}

function insideEdge(corners: readonly Point[], pxToMm: Homography): Point[] {
  const middle = { x: corners.reduce((s, p) => s + p.x, 0) / 4, y: corners.reduce((s, p) => s + p.y, 0) / 4 };
  return insetPolygon(corners, SHEET_EDGE_MM / localScale(pxToMm, middle));
}

function brightness({ rgba }: Pixels, turning: Turning): Brightness {
  const index = (x: number, y: number) => { const p = storedPlace(turning, { x: x + 0.5, y: y + 0.5 }); return 4 * (Math.floor(p.y) * turning.width + Math.floor(p.x)); };
  const first = index(0, 0), right = index(1, 0) - first, down = index(0, 1) - first;
  return {
    ...uprightSize(turning),
    at: (x, y) => { const i = first + x * right + y * down; return luminance(rgba[i], rgba[i + 1], rgba[i + 2]); },
  };
}
