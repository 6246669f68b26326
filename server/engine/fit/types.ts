import type { Outline, Point } from '../geometry/types.ts';

export type DieShape =
  | { kind: 'rectangle'; widthMm: number; heightMm: number; cornerRadiusMm?: number }
  | { kind: 'oval'; widthMm: number; heightMm: number } // a circle where they are equal
  | { kind: 'stadium'; widthMm: number; heightMm: number }
  | { kind: 'outline'; outline: Outline } // traced or imported
  // and, each with a literal kind of its own and its few parameters: scalloped, bracket, notched, tag, banner, hexagon, arch
  ;
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
