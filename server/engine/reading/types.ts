import type { Box, Outline, Point } from '../geometry/types.ts';

export interface ReadOptions {
  /** Typed by the person; wins over what the file says. */
  dpi?: number;
  /** Two points in the picture (px, as in Reading.widthPx) and their true distance. */
  ruler?: { from: Point; to: Point; lengthMm: number };
  /** A sheet of known size seen in the picture; corners in px: top left, top right, bottom right, bottom left of the sheet as read. */
  sheet?: { cornersPx: [Point, Point, Point, Point]; widthMm: number; heightMm: number };
  /** The picture shows the stamps' own faces, where words stand mirrored: flip it left to right first. */
  mirrored?: boolean;
  /** Default 'auto'. */
  groupingGapMm?: number | 'auto';
  corrections?: Corrections;
  /** Printed / true size of the photo page, where the printer is not corrected; default 1. */
  photoPageScale?: { x: number; y: number };
}

export interface Reading {
  /**
   * Size after EXIF orientation and flipping; every …Px below refers to this picture. Pixel (i, j) covers [i, i+1) × [j, j+1): one pixel
   * of ink is a box 1 × 1. Outlines run along the edge, half way between ink and paper, with sub-pixel places, never through pixel centres.
   * Ruler, corners and pxToMm use the same coordinates.
   */
  widthPx: number; heightPx: number;
  /** Picture → true sheet: a homography, row by row; a plain scale for a scan. Null while no scale is known. */
  pxToMm: [number, number, number, number, number, number, number, number, number] | null;
  /** At the middle of the picture. */
  mmPerPx: number | null;
  scaleSource: 'typed' | 'ruler' | 'sheet' | 'photo-page' | 'file' | null;
  groupingGapMm: number | null; groupingGapPx: number;
  parts: ReadPart[];
  /** Edges of the minimum spanning tree over the parts' true nearest distances. */
  links: { a: number; b: number; gapMm: number | null; gapPx: number }[];
  sentiments: ReadSentiment[];
  warnings: { code: string; message: string }[];
  /** Corners of the sheet in the picture, where they are known: only ink within them is read. */
  sheetPx?: Point[];
  /** The sheet's corners as they were found in a photograph, from the top left on, clockwise: to be proposed, since the sheet's size is not known. */
  foundCornersPx?: Point[];
  /** Parts that splits divided, as they were read; `parts` has their pieces instead. */
  undivided?: ReadPart[];
  /** What this grouping was asked for, so that a scale given later groups alike. */
  grouping?: { gap: number | 'auto'; corrections: Corrections };
}

/** One connected piece of ink. */
export interface ReadPart {
  id: number;
  boxPx: Box;
  areaPx2: number;
  areaMm2: number | null;
  /** In picture px, not moved to its own corner. The first ring goes round the outside. */
  outlinePx: Outline;
  thinnestStrokeMm: number | null;
  /** Set for pieces of a part that a split divided: that part's id. */
  dividedFrom?: number;
}

export interface ReadSentiment {
  partIds: number[];
  boxPx: Box;
  /** Null while no scale is known. Sizes of the ink's box after its lean is taken out: the sentiment set level. */
  widthMm: number | null; heightMm: number | null;
  /**
   * Lean on the true sheet; turning by -angleDeg sets it level. The outline below is level. The lean common to the sheet, from all
   * baselines together; 0 where it cannot be told from 0; a sentiment's own only where it surely differs (more than 2°).
   */
  angleDeg: number;
  outline: Outline | null;
  inkAreaMm2: number | null; thinnestStrokeMm: number | null;
}

/** What the person put right, as places in the picture, so that it outlives another reading. A point names the part nearest to it. */
export interface Corrections {
  /** Each list: parts that belong to one sentiment. */
  joins: Point[][];
  /** Lines drawn across: links that cross one are cut, and a part that crosses one is divided along it. */
  splits: { from: Point; to: Point }[];
  /** Parts that are no sentiment. */
  setAside: Point[];
}

