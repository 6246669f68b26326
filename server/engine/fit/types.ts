import type { Outline, Point } from '../geometry/types.ts';

/** Cut lines. widthMm × heightMm is always the box of the cut line. What each shape needs and its limits: die-shapes.ts. */
export type DieShape =
  | { kind: 'rectangle'; widthMm: number; heightMm: number; cornerRadiusMm?: number }
  | { kind: 'oval'; widthMm: number; heightMm: number } // a circle where they are equal
  | { kind: 'stadium'; widthMm: number; heightMm: number }
  /** Equal arcs along an oval or a rectangle. */
  | { kind: 'scalloped'; base: 'oval' | 'rectangle'; widthMm: number; heightMm: number; /** Width of one scallop. */ scallopMm: number; /** From cusp to crest. */ depthMm: number }
  /** A step into each corner and an arc between the steps, bulging out or bitten in. */
  | { kind: 'bracket'; corners: 'convex' | 'concave'; widthMm: number; heightMm: number; radiusMm: number; stepMm: number }
  /** A round bite out of each corner, or out of the middle of the two ends. */
  | { kind: 'notched'; at: 'corners' | 'ends'; widthMm: number; heightMm: number; notchRadiusMm: number }
  /** One end with its corners cut off and a hole: the left end of a wide tag, the top of a tall one. */
  | { kind: 'tag'; widthMm: number; heightMm: number; shoulderMm: number; /** Diameter; 0 for none. */ holeMm: number }
  /** A V cut into the right end of a wide banner or the bottom of a tall one, or into both ends. */
  | { kind: 'banner'; ends: 'one' | 'two'; widthMm: number; heightMm: number; forkMm: number }
  /** Points to the left and right; regular where pointMm is a quarter of the width and the height √3/2 of it. */
  | { kind: 'hexagon'; widthMm: number; heightMm: number; pointMm?: number }
  /** Straight foot and sides under a half oval. */
  | { kind: 'arch'; widthMm: number; heightMm: number; riseMm?: number }
  | { kind: 'outline'; outline: Outline }; // traced or imported

export interface DieGeometry {
  shape: DieShape;
  /** The ink must stay inside the cut line inset by this (stitched or embossed line). */
  stitchInsetMm?: number;
  /** Metal outside the cut line. */
  rimMm?: number;
}

export interface FitOptions {
  /** Turns of the artwork that are tried; default [0]. Of equally good ones the earliest wins. */
  turnsDeg?: number[];
  /** Free tilt to either side of each turn; default 0. */
  tiltDeg?: number;
  goodMm?: number; snugMm?: number;
}

export interface Fit {
  /** borderMm ≥ −1e-6. */
  fits: boolean;
  /**
   * Largest distance that can be kept between all ink and the usable area's edge. Below zero where not all ink can be inside: for a convex
   * area the linear programme's value (how far its edges' lines would have to move outwards), else minus the greatest distance of ink outside.
   */
  borderMm: number;
  /** Proven: no place is better than this. Equal to borderMm for convex areas at fixed turns, within 0.02 mm with tilt or for other areas. */
  boundMm: number;
  /** Where the centre of the artwork's (unturned) box comes to lie in the box of the die's cut line. */
  centre: Point;
  /** Turn of the artwork about that centre. */
  rotationDeg: number;
  /** From the turned ink's box to the usable area's box. */
  margins: { left: number; right: number; top: number; bottom: number };
  /** 'roomy' is given by fitTable only: good, and a smaller of the given dies is good too. */
  verdict: 'roomy' | 'good' | 'snug' | 'tight' | 'no';
}
