/**
 * A picture file → its sentiments in mm: decoding, ink from paper, connected pieces with outlines, scale, grouping.
 *
 * Input: the file's bytes and what the person said; not mutated. Output: a Reading; see types.ts for the exact meaning of its places.
 * Rejects with ReadingError. Runs on the calling thread. Memory: 4 bytes a pixel while decoding, then 2.
 */
import { outlineBox } from '../geometry/ring.ts';
import type { Control } from '../control.ts';
import { findComponents } from './components.ts';
import { traceContours } from './contour.ts';
import { decodePicture } from './decode.ts';
import { NO_CORRECTIONS, regroup, withScale } from './grouping.ts';
import { mapInk, type InkMap } from './ink-map.ts';
import { maskInk } from './ink-mask.ts';
import { turnUpright, uprightSize, type Turning } from './orientation.ts';
import { estimatePaper } from './paper.ts';
import { probePicture, type PictureHeader } from './probe.ts';
import { noInk } from './reading-error.ts';
import { fileScale, givenScale } from './scale.ts';
import { simplifyRing } from './simplify.ts';
import type { Reading, ReadOptions, ReadPart } from './types.ts';

/** Parts' outlines may lose this much, mm, or this share of a pixel while no scale is known. */
const PART_TOLERANCE_MM = 0.02;
const PART_TOLERANCE_PX = { least: 0.1, most: 0.4, unknown: 0.2 };
/** Dust is isolated and smaller than this. */
const DUST_MM = 0.25;
/** Where no scale is known: dust of a scan at 300 dpi. */
const DUST_PX = 3;

export async function readStampSheet(file: Uint8Array, options: ReadOptions, control?: Control): Promise<Reading> {
  const progress = (done: number, stage: string) => control?.onProgress?.(done, stage);
  const header = probePicture(file);
  const given = givenScale(options);
  progress(0, 'decoding');
  const { map, turning } = await inkOf(file, header, options.mirrored ?? false, progress);
  const upright = uprightSize(turning);

  progress(0.6, 'finding ink');
  const scale = given ?? fileScale(header.dpi);
  const mmPerPx = scale ? scale.pxToMm[0] : null;
  const parts = findParts({ ...map, ...upright, values: turnUpright(map.values, turning) }, mmPerPx);
  if (parts.length === 0) throw noInk();

  progress(0.85, 'grouping');
  const bare: Reading = {
    widthPx: upright.width, heightPx: upright.height, pxToMm: null, mmPerPx: null, scaleSource: null,
    groupingGapMm: null, groupingGapPx: 0, parts, links: [], sentiments: [], warnings: [],
  };
  const scaled = scale ? withScale(bare, scale.pxToMm, scale.source, scale.source === 'sheet' ? options.sheet?.cornersPx : undefined) : bare;
  const warnings = scale ? [] : [{ code: 'no-scale', message: 'The picture does not say its scale, so sizes are not known yet. Type the scan’s dpi, or drag a ruler over a length that you know.' }];
  const reading = regroup({ ...scaled, warnings }, scale ? (options.groupingGapMm ?? 'auto') : 'auto', options.corrections ?? NO_CORRECTIONS);
  if (reading.sentiments.length === 0 && (options.corrections?.setAside.length ?? 0) === 0) throw noInk();
  progress(1, 'done');
  return reading;
}

/** The pixels are let go of as soon as the map is made. */
async function inkOf(file: Uint8Array, header: PictureHeader, mirrored: boolean, progress: (done: number, stage: string) => void): Promise<{ map: InkMap; turning: Turning }> {
  const pixels = await decodePicture(file, header);
  progress(0.35, 'levelling light');
  const map = mapInk(pixels, estimatePaper(pixels));
  if (!map) throw noInk();
  return { map, turning: { width: pixels.width, height: pixels.height, orientation: header.orientation, mirrored } };
}

function findParts(map: InkMap, mmPerPx: number | null): ReadPart[] {
  const mask = maskInk(map);
  const tolerance = mmPerPx === null ? PART_TOLERANCE_PX.unknown : Math.min(PART_TOLERANCE_PX.most, Math.max(PART_TOLERANCE_PX.least, PART_TOLERANCE_MM / mmPerPx));
  const dust = mmPerPx === null ? DUST_PX : DUST_MM / mmPerPx;
  const pieces = findComponents(mask.ink, mask.width, mask.height).filter((c) => Math.max(c.right - c.left, c.bottom - c.top) + 1 >= dust);
  return pieces.map((piece, id) => {
    const traced = traceContours(mask, piece);
    const boxPx = outlineBox(traced);
    const rings = traced.rings.map((ring) => simplifyRing(ring, tolerance).map((p) => ({ x: hundredth(p.x), y: hundredth(p.y) })));
    return { id, boxPx, areaPx2: piece.pixels, areaMm2: null, outlinePx: { rings: rings.filter((ring, i) => i === 0 || ring.length >= 3) }, thinnestStrokeMm: null };
  });
}

/** Outlines are stored and sent; digits beyond a hundredth of a pixel say nothing. */
function hundredth(v: number): number {
  return Math.round(v * 100) / 100;
}
