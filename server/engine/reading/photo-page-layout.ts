/**
 * The photo page: a printed page on which a stamped sheet is laid and photographed, so that the picture's scale and perspective are
 * known from the markers round it. This file is the one description of it: the page is drawn from it and photographs are read by it.
 *
 * Axes: millimetres from the middle of the page, x right, y down. The places are the same for every paper, so that a photograph
 * needs no word about the paper it was printed on: A4 (210 × 297) and Letter (215.9 × 279.4) both hold all markers with at least
 * 8 mm of paper around them, which is more than common printers leave unprinted at the sides.
 *
 * Markers are of the dictionary DICT_4X4_50 of OpenCV's aruco module (S. Garrido-Jurado et al., "Automatic generation and detection
 * of highly reliable fiducial markers under occlusion", Pattern Recognition 47 (2014)): 4 × 4 cells inside a black border one cell wide.
 * The ids name the version of the layout: version v has the ids 8 (v − 1) to 8 v − 1. A page once printed stays readable; a new
 * layout takes the next ids and the old one is kept.
 *
 * Nothing may be printed within `PHOTO_PAGE_ROOM`: all ink found there belongs to the sheet. Everything outside it is not read.
 */
import type { Box, Point, Ring } from '../geometry/types.ts';

export interface PhotoPageMarker {
  id: number;
  /** From the page's middle. */
  centre: Point;
  /** Four rows of four cells, top to bottom as printed; '1' is a white cell. */
  bits: readonly [string, string, string, string];
}

export const PHOTO_PAGE_DICTIONARY = 'DICT_4X4_50';
export const PHOTO_PAGE_VERSION = 1;
/** Side of a marker with its black border, without the white around it. */
export const MARKER_SIDE_MM = 15;
/** Cells along a side, border included: the border is one cell wide on each side. */
export const MARKER_CELLS = 6;
/** White that must be left around each marker by anything else that is printed: two cells, so that its border is seen. */
export const MARKER_QUIET_MM = (2 * MARKER_SIDE_MM) / MARKER_CELLS;

/** Clockwise from the top left corner. The middles of the sides keep the page flat in the reckoning where a corner is hidden. */
export const PHOTO_PAGE_MARKERS: readonly PhotoPageMarker[] = [
  { id: 0, centre: { x: -89, y: -117 }, bits: ['1011', '0101', '0011', '0010'] },
  { id: 1, centre: { x: 0, y: -117 }, bits: ['0000', '1111', '1001', '1010'] },
  { id: 2, centre: { x: 89, y: -117 }, bits: ['0011', '0011', '0010', '1101'] },
  { id: 3, centre: { x: 89, y: 0 }, bits: ['1001', '1001', '0100', '0110'] },
  { id: 4, centre: { x: 89, y: 117 }, bits: ['0101', '0100', '1001', '1110'] },
  { id: 5, centre: { x: 0, y: 117 }, bits: ['0111', '1001', '1100', '1101'] },
  { id: 6, centre: { x: -89, y: 117 }, bits: ['1001', '1110', '0010', '1110'] },
  { id: 7, centre: { x: -89, y: 0 }, bits: ['1100', '0100', '1111', '0010'] },
];

/**
 * Where the sheet is laid, from the page's middle, 1.5 mm clear of every marker: a 152.4 mm square or a halved Letter sheet
 * (139.7 × 215.9 mm) lies in it. White paper serves as the white round a marker; a dark sheet this long may cost the two middle ones.
 */
export const PHOTO_PAGE_ROOM: Box = { x: -80, y: -108, w: 160, h: 216 };

/** Corners of a marker in the order in which a detector tells them: top left, top right, bottom right, bottom left as printed. */
export function markerCorners(marker: PhotoPageMarker): [Point, Point, Point, Point] {
  const { x, y } = marker.centre, r = MARKER_SIDE_MM / 2;
  return [{ x: x - r, y: y - r }, { x: x + r, y: y - r }, { x: x + r, y: y + r }, { x: x - r, y: y + r }];
}

/**
 * What is printed black, from the page's middle: the square of the marker and, inside it, its white cells; to be filled even-odd.
 * White cells side by side in a row are one ring. Where rings of two rows touch, both are white, so no edge is drawn twice.
 */
export function markerRings(marker: PhotoPageMarker): Ring[] {
  const rings: Ring[] = [markerCorners(marker)];
  const cell = MARKER_SIDE_MM / MARKER_CELLS;
  const left = marker.centre.x - MARKER_SIDE_MM / 2, top = marker.centre.y - MARKER_SIDE_MM / 2;
  marker.bits.forEach((row, r) => {
    for (const run of row.matchAll(/1+/g)) {
      const x0 = left + (run.index + 1) * cell, x1 = x0 + run[0].length * cell;
      const y0 = top + (r + 1) * cell, y1 = y0 + cell;
      rings.push([{ x: x0, y: y0 }, { x: x1, y: y0 }, { x: x1, y: y1 }, { x: x0, y: y1 }]);
    }
  });
  return rings;
}
