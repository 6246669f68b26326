/**
 * Connected pieces of ink with their outlines, dust and the paper's edges left out.
 *
 * Input: an ink map, upright; the polygon that is read, or null; mm per pixel at the picture's middle, or null. Not mutated. Output: parts in picture
 * px, without measures in mm. Cost: one pass over the map and the length of all outlines.
 *
 * Dust is smaller than DUST_MM and isolated: nothing larger lies nearby. The dot of an i, a full stop, a dot in a row of dots are near others.
 * A piece that touches the edge of what is read, where that edge is a sheet's, is the sheet's edge or what lies beyond.
 */
import { outlineBox } from '../geometry/ring.ts';
import type { Box, Point } from '../geometry/types.ts';
import { findComponents, type Component } from './components.ts';
import { traceContours } from './contour.ts';
import { boxDistance } from './gaps.ts';
import { INK_LEVEL, type InkMap } from './ink-map.ts';
import { maskInk, type InkMask } from './ink-mask.ts';
import { segmentDistanceSq, simplifyRing } from './simplify.ts';
import type { ReadPart } from './types.ts';

/** Parts' outlines may lose this much, mm, or this share of a pixel while no scale is known. */
const PART_TOLERANCE_MM = 0.02;
const PART_TOLERANCE_PX = { least: 0.1, most: 0.4, unknown: 0.2 };
const DUST_MM = 0.25;
/** Where no scale is known: as in a scan at 300 dpi. */
const UNKNOWN_MM_PER_PX = 25.4 / 300;
/** A dot belongs to what is within this many of its own sizes. */
const DOT_REACH = 4;
/** Smaller than this is dust even beside letters: no ink prints so fine a dot. */
const SPECK_MM = 0.12;
/** Blur makes specks look larger, not heavier: one no larger than this counts by the disc that its ink would fill. */
const BLURRED_DUST_MM = 0.45;
const EDGE_PX = 2;
/** A paper's edge shows as a line thinner than this, longer than the first share of the picture, or along its border than the second. */
const EDGE_LINE_MM = 1, LONG_SHARE = 0.5, ALONG_BORDER = 0.75;
/** A straight line that leans by up to 8° is no wider than this share of its length; letters are. */
const SLENDER = 0.15;

export function findParts(map: InkMap, polygon: readonly Point[] | null, mmPerPx: number | null): ReadPart[] {
  const mask = maskInk(map);
  const tolerance = mmPerPx === null ? PART_TOLERANCE_PX.unknown : Math.min(PART_TOLERANCE_PX.most, Math.max(PART_TOLERANCE_PX.least, PART_TOLERANCE_MM / mmPerPx));
  const scale = mmPerPx ?? UNKNOWN_MM_PER_PX;
  const pieces = withoutDust(findComponents(mask.ink, mask.width, mask.height), mask, scale);
  const parts: ReadPart[] = [];
  for (const piece of pieces) {
    const traced = traceContours(mask, piece);
    if (polygon && touchesEdge(traced.rings[0], polygon)) continue;
    const rings = traced.rings.map((ring) => simplifyRing(ring, tolerance).map((p) => ({ x: hundredth(p.x), y: hundredth(p.y) })));
    const outlinePx = { rings: rings.filter((ring, i) => i === 0 || ring.length >= 3) };
    parts.push({ id: parts.length, boxPx: outlineBox(outlinePx), areaPx2: piece.pixels, areaMm2: null, outlinePx, thinnestStrokeMm: null });
  }
  return withoutPaperEdges(parts, mask.width, mask.height, scale).map((part, id) => ({ ...part, id }));
}

/**
 * Shadow lines along a paper's edges: thin, open (a frame is closed), and round everything else or along a border of the picture. What stands alone
 * in a picture is never taken for one.
 */
function withoutPaperEdges(parts: ReadPart[], width: number, height: number, mmPerPx: number): ReadPart[] {
  const most = EDGE_LINE_MM / mmPerPx;
  const suspects = parts.filter(({ boxPx: b, areaPx2, outlinePx }) => outlinePx.rings.length === 1 && (b.w > LONG_SHARE * width || b.h > LONG_SHARE * height) && areaPx2 < most * (b.w + b.h));
  const others = parts.filter((part) => !suspects.includes(part));
  if (suspects.length === 0 || others.length === 0) return parts;
  const rest = outlineBox({ rings: others.flatMap((part) => part.outlinePx.rings) });
  const isEdge = ({ boxPx: b }: ReadPart) => {
    const round = b.x <= rest.x && b.y <= rest.y && b.x + b.w >= rest.x + rest.w && b.y + b.h >= rest.y + rest.h;
    const outside = b.x > rest.x + rest.w || b.x + b.w < rest.x || b.y > rest.y + rest.h || b.y + b.h < rest.y;
    const along = Math.max(b.w / width, b.h / height) > ALONG_BORDER && Math.min(b.w, b.h) < SLENDER * Math.max(b.w, b.h);
    return round || (outside && along);
  };
  return parts.filter((part) => !suspects.includes(part) || !isEdge(part));
}

/** Outlines are stored and sent; digits beyond a hundredth of a pixel say nothing. */
function hundredth(v: number): number {
  return Math.round(v * 100) / 100;
}

function withoutDust(pieces: readonly Component[], mask: InkMask, mmPerPx: number): Component[] {
  const boxOf = (c: Component): Box => ({ x: c.left, y: c.top, w: c.right - c.left + 1, h: c.bottom - c.top + 1 });
  const least = SPECK_MM / mmPerPx, dust = DUST_MM / mmPerPx, blurred = BLURRED_DUST_MM / mmPerPx;
  const sizes = pieces.map((c) => {
    const size = Math.max(c.right - c.left, c.bottom - c.top) + 1;
    return size > blurred ? size : Math.min(size, discOf(c, mask));
  });
  const large = pieces.filter((_, i) => sizes[i] >= dust).map(boxOf);
  return pieces.filter((piece, i) => {
    if (sizes[i] >= dust) return true;
    // A pixel alone is a whole dot only where pixels are coarse.
    if (sizes[i] < least || piece.pixels < 2) return false;
    const box = boxOf(piece), reach = DOT_REACH * sizes[i];
    return large.some((b) => boxDistance(b, box) <= reach);
  });
}

/** Diameter of the disc of full ink that weighs as much as what is there, the blurred rim included. */
function discOf(piece: Component, mask: InkMask): number {
  const rim = 2;
  let ink = 0;
  for (let y = Math.max(0, piece.top - rim); y <= Math.min(mask.height - 1, piece.bottom + rim); y++) {
    for (let x = Math.max(0, piece.left - rim); x <= Math.min(mask.width - 1, piece.right + rim); x++) ink += Math.max(0, mask.values[y * mask.width + x] - 0.25 * mask.floor);
  }
  return 2 * Math.sqrt(ink / INK_LEVEL / Math.PI);
}

function touchesEdge(ring: readonly Point[], polygon: readonly Point[]): boolean {
  return ring.some((p) => polygon.some((a, i) => segmentDistanceSq(p, a, polygon[(i + 1) % polygon.length]) < EDGE_PX * EDGE_PX));
}
