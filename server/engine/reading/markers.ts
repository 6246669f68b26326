/**
 * The photo page's markers in a photograph: where they are, and the map from the picture to the page in mm that follows.
 *
 * Input: brightness of the upright, unflipped picture; not mutated. Output: a homography from picture px to mm, origin at the top
 * left of the page's room, and that room's corners in the picture; null where fewer than LEAST_MARKERS of the layout are seen or their
 * places contradict each other. OpenCV's aruco detector finds the markers in a reduced picture; their sides are then fitted anew at full
 * size, each from many crossings half way between black and white, and corners are where sides meet. Cost: one detection in at most DETECT_SIDE_PX.
 */
import type { Point } from '../geometry/types.ts';
import { applyHomography, homographyFrom, invertHomography, multiply, type Homography } from './homography.ts';
import { fitLine, meetingPlace, type Line } from './line-fit.ts';
import { loadOpenCv, type Cv } from './opencv.ts';
import { markerCorners, PHOTO_PAGE_DICTIONARY, PHOTO_PAGE_MARKERS, PHOTO_PAGE_ROOM } from './photo-page-layout.ts';

/** From 0 to 255 at whole places within the picture: asked for where it is needed, since a second copy of a large picture is dear. */
export interface Brightness { width: number; height: number; at: (x: number, y: number) => number }
interface Reduced { width: number; height: number; values: Uint8Array }
export interface PhotoPage { pxToMm: Homography; roomMm: { w: number; h: number }; roomPx: Point[]; markers: number }

/** A marker of a page that fills half the picture still has 40 pixels along a side. */
const DETECT_SIDE_PX = 1600;
/** Three of eight span a plane well; two could be ornaments that look alike. */
const LEAST_MARKERS = 3;
/** A corner off the common plane by more is no corner of the page: it lies on a fold, or is another thing. */
const STRAY_MM = 0.8;

export async function findPhotoPage(picture: Brightness, printedScale: { x: number; y: number }): Promise<PhotoPage | null> {
  const { cv } = await loadOpenCv();
  const seen = detect(cv, picture);
  let places = PHOTO_PAGE_MARKERS.flatMap((marker) => {
    const corners = seen.get(marker.id);
    if (!corners) return [];
    const room = markerCorners(marker).map((p) => ({ x: (p.x - PHOTO_PAGE_ROOM.x) * printedScale.x, y: (p.y - PHOTO_PAGE_ROOM.y) * printedScale.y }));
    return [{ px: refineCorners(picture, corners), mm: room }];
  });
  while (places.length >= LEAST_MARKERS) {
    const pxToMm = homographyFrom(places.flatMap((p) => p.px), places.flatMap((p) => p.mm));
    if (!pxToMm) return null;
    const off = places.map((p) => Math.max(...p.px.map((corner, i) => distance(applyHomography(pxToMm, corner), p.mm[i]))));
    const worst = off.indexOf(Math.max(...off));
    if (off[worst] <= STRAY_MM) return asSeen(pxToMm, picture, printedScale, places.length);
    places = places.filter((_, i) => i !== worst);
  }
  return null;
}

/**
 * The page may have been photographed from any side, and the sheet be laid on it either way; the picture is taken as people want to read it. So
 * the page's axes are turned by quarters until they run as the picture's do, with the origin at the room's top left as then seen.
 */
function asSeen(pageMm: Homography, picture: Brightness, scale: { x: number; y: number }, markers: number): PhotoPage {
  let pxToMm = pageMm, w = PHOTO_PAGE_ROOM.w * scale.x, h = PHOTO_PAGE_ROOM.h * scale.y;
  const middle = { x: picture.width / 2, y: picture.height / 2 };
  for (let quarter = 0; quarter < 4; quarter++) {
    const from = applyHomography(pxToMm, middle), to = applyHomography(pxToMm, { x: middle.x + 1, y: middle.y });
    if (to.x - from.x >= Math.abs(to.y - from.y)) break;
    pxToMm = multiply([0, -1, h, 1, 0, 0, 0, 0, 1], pxToMm);
    [w, h] = [h, w];
  }
  const back = invertHomography(pxToMm);
  const corners = [{ x: 0, y: 0 }, { x: w, y: 0 }, { x: w, y: h }, { x: 0, y: h }];
  return { pxToMm, roomMm: { w, h }, roomPx: corners.map((p) => applyHomography(back, p)), markers };
}

function detect(cv: Cv, picture: Brightness): Map<number, Point[]> {
  const factor = Math.ceil(Math.max(1, Math.max(picture.width, picture.height) / DETECT_SIDE_PX));
  const small = reduce(picture, factor);
  const api = cv as unknown as ArucoApi;
  const image = new api.Mat(small.height, small.width, api.CV_8UC1);
  const corners = new api.MatVector(), ids = new api.Mat(), rejected = new api.MatVector();
  const parameters = new api.aruco_DetectorParameters(), refine = new api.aruco_RefineParameters(10, 3, true);
  const dictionary = api.getPredefinedDictionary(api[PHOTO_PAGE_DICTIONARY]);
  const detector = new api.aruco_ArucoDetector(dictionary, parameters, refine);
  const found = new Map<number, Point[]>();
  try {
    image.data.set(small.values);
    detector.detectMarkers(image, corners, ids, rejected);
    for (let i = 0; i < ids.rows; i++) {
      const quad = corners.get(i), xy = quad.data32F;
      // The detector speaks of pixels' middles; so does the reduced picture, whose pixels are squares of the full one.
      found.set(ids.data32S[i], [0, 2, 4, 6].map((k) => ({ x: (xy[k] + 0.5) * factor, y: (xy[k + 1] + 0.5) * factor })));
      quad.delete();
    }
  } finally {
    for (const made of [image, corners, ids, rejected, parameters, refine, dictionary, detector]) made.delete();
  }
  return found;
}

interface Deletable { delete(): void }
interface ByteMat extends Deletable { rows: number; data: Uint8Array; data32F: Float32Array; data32S: Int32Array }
/** The package's own types leave aruco out. */
interface ArucoApi {
  CV_8UC1: number;
  DICT_4X4_50: number;
  Mat: new (rows?: number, columns?: number, type?: number) => ByteMat;
  MatVector: new () => Deletable & { get(i: number): ByteMat };
  aruco_DetectorParameters: new () => Deletable;
  aruco_RefineParameters: new (minDistance: number, errorRate: number, anyOrder: boolean) => Deletable;
  aruco_ArucoDetector: new (dictionary: Deletable, parameters: Deletable, refine: Deletable) => Deletable & { detectMarkers(image: ByteMat, corners: Deletable, ids: ByteMat, rejected: Deletable): void };
  getPredefinedDictionary(name: number): Deletable;
}

/** Each reduced pixel from two by two places of its square of `factor` pixels; the rest at the right and the bottom is left out. */
function reduce(picture: Brightness, factor: number): Reduced {
  const width = Math.floor(picture.width / factor), height = Math.floor(picture.height / factor);
  const values = new Uint8Array(width * height), near = factor >> 2, far = factor - 1 - near;
  for (let y = 0, to = 0; y < height; y++) {
    const top = y * factor + near, bottom = y * factor + far;
    for (let x = 0; x < width; x++, to++) {
      const left = x * factor + near, right = x * factor + far;
      values[to] = (picture.at(left, top) + picture.at(right, top) + picture.at(left, bottom) + picture.at(right, bottom)) / 4 + 0.5;
    }
  }
  return { width, height, values };
}

/** Each side by a line through its crossings, corners where neighbouring sides meet; a corner stays where that fails. */
function refineCorners(picture: Brightness, corners: readonly Point[]): Point[] {
  const sides = corners.map((a, i) => fitSide(picture, a, corners[(i + 1) % 4], corners));
  return corners.map((corner, i) => {
    const one = sides[(i + 3) % 4], other = sides[i];
    const met = one && other && meetingPlace(one, other);
    return met && distance(met, corner) < 0.12 * distance(corners[0], corners[2]) ? met : corner;
  });
}

/** Crossings are looked for from half a cell outside to half a cell inside, on the middle four fifths of the side. */
function fitSide(picture: Brightness, a: Point, b: Point, corners: readonly Point[]): Line | null {
  const length = distance(a, b);
  if (length < 12) return null;
  const centre = { x: (corners[0].x + corners[2].x) / 2, y: (corners[0].y + corners[2].y) / 2 };
  let nx = -(b.y - a.y) / length, ny = (b.x - a.x) / length;
  if ((centre.x - a.x) * nx + (centre.y - a.y) * ny < 0) { nx = -nx; ny = -ny; }
  const reach = Math.max(2, length / 13), crossings: Point[] = [];
  for (let s = 0.1; s <= 0.9; s += Math.max(0.01, 1 / length)) {
    const at = crossingAlong(picture, { x: a.x + s * (b.x - a.x), y: a.y + s * (b.y - a.y) }, nx, ny, reach);
    if (at) crossings.push(at);
  }
  return crossings.length < 8 ? null : fitLine(crossings);
}

function crossingAlong(picture: Brightness, p: Point, nx: number, ny: number, reach: number): Point | null {
  const outside = sample(picture, p.x - reach * nx, p.y - reach * ny), inside = sample(picture, p.x + reach * nx, p.y + reach * ny);
  if (outside - inside < 30) return null;
  const half = (outside + inside) / 2, step = 0.5;
  let before = outside;
  for (let d = -reach + step; d <= reach; d += step) {
    const value = sample(picture, p.x + d * nx, p.y + d * ny);
    if (value <= half) {
      const back = before > value ? ((half - value) / (before - value)) * step : 0;
      return { x: p.x + (d - back) * nx, y: p.y + (d - back) * ny };
    }
    before = value;
  }
  return null;
}

/** Between pixels' middles; the picture's edge goes on outwards. */
function sample(picture: Brightness, x: number, y: number): number {
  const { width, height } = picture;
  const u = Math.min(width - 1.001, Math.max(0, x - 0.5)), v = Math.min(height - 1.001, Math.max(0, y - 0.5));
  const i = Math.floor(u), j = Math.floor(v), f = u - i, g = v - j;
  return (picture.at(i, j) * (1 - f) + picture.at(i + 1, j) * f) * (1 - g) + (picture.at(i, j + 1) * (1 - f) + picture.at(i + 1, j + 1) * f) * g;
}

function distance(a: Point, b: Point): number {
  return Math.hypot(b.x - a.x, b.y - a.y);
}
