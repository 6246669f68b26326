/**
 * Parts of ink → sentiments: the gaps between parts, the tree over them, the cut, and what the person put right. The one
 * implementation, used when a picture is read and again in the browser when the gap or a correction changes.
 *
 * Input: a reading; never mutated. Output: a new one that shares what did not change. Distances are true ones on the sheet, mm, or picture
 * px while no scale is known. Order: parts are divided along the split lines; set-aside parts leave; the spanning tree over the rest is cut at the gap and
 * where a split line crosses a link; joins bring groups together again, and win. With 'auto' the gap is chosen (auto-gap.ts), and where no one gap
 * serves the whole sheet groups are chosen relative to their own sizes (relative-grouping.ts); a gap that is given cuts as it says. A correction that names nothing any more is passed over.
 * Cost: that of the spanning tree, about linear in the outlines' points.
 */
import { outlineArea, outlineBox } from '../geometry/ring.ts';
import { mapOutline, rotatePoint } from '../geometry/transform.ts';
import type { Box, Outline, Point } from '../geometry/types.ts';
import { autoGap } from './auto-gap.ts';
import { divideOutline } from './divide.ts';
import { DisjointSets, distanceToOutline, segmentsCross, spanningLinks, type Link } from './gaps.ts';
import { applyHomography, invertHomography, localScale, type Homography } from './homography.ts';
import { findLeans } from './lean.ts';
import { ringContains } from '../geometry/ring.ts';
import { keptLinks as linksToKeep } from './relative-grouping.ts';
import { givenScale } from './scale.ts';
import { simplifyRing } from './simplify.ts';
import { thinnestStroke } from './stroke.ts';
import type { Corrections, Reading, ReadOptions, ReadPart, ReadSentiment } from './types.ts';

/** A sentiment's outline may be off by 0.05 mm; what the parts' outlines already lost comes out of the same purse. */
const OUTLINE_TOLERANCE_MM = 0.02;
export const NO_CORRECTIONS: Corrections = { joins: [], splits: [], setAside: [] };

export function regroup(reading: Reading, groupingGap: number | 'auto', corrections: Corrections): Reading {
  if (groupingGap !== 'auto' && !(groupingGap >= 0)) throw new RangeError(`A grouping gap is a length of 0 or more, not ${groupingGap}.`);
  const sheet = new Sheet(reading.pxToMm);
  const { parts, undivided } = divideParts(reading, corrections, sheet);
  const outlines = parts.map((part) => sheet.outline(part.outlinePx));
  const links = spanningLinks(outlines);
  const aside = new Set(corrections.setAside.map((p) => nearestPart(parts, p)));
  const kept = parts.map((_, i) => i).filter((i) => !aside.has(i) && !isOutside(reading, parts[i]));
  const keptOutlines = kept.map((i) => outlines[i]);
  const treeLinks = kept.length === parts.length ? links : spanningLinks(keptOutlines);
  const gap = groupingGap === 'auto' ? autoGap(treeLinks, keptOutlines) : groupingGap;
  const isKept = groupingGap === 'auto' ? linksToKeep(treeLinks, keptOutlines, gap) : treeLinks.map((l) => l.distance <= gap);
  const holding = treeLinks.filter((_, i) => isKept[i]).map((l) => ({ ...l, a: kept[l.a], b: kept[l.b] }));
  const groups = groupParts(parts, kept, holding, corrections, sheet);
  const scale = reading.mmPerPx;
  return {
    ...reading,
    groupingGapMm: scale === null ? null : gap,
    groupingGapPx: scale === null ? gap : gap / scale,
    parts,
    undivided,
    links: links.map((l) => ({ a: parts[l.a].id, b: parts[l.b].id, gapMm: scale === null ? null : l.distance, gapPx: sheet.pxDistance(l.from, l.to) })),
    sentiments: describe(parts, outlines, groups, scale),
    grouping: { gap: groupingGap, corrections },
  };
}

export function applyScale(reading: Reading, scale: Pick<ReadOptions, 'dpi' | 'ruler' | 'sheet'>): Reading {
  const given = givenScale(scale);
  if (!given) return reading;
  const mmPerPx = localScale(given.pxToMm, { x: reading.widthPx / 2, y: reading.heightPx / 2 });
  const asked = reading.grouping?.gap ?? 'auto';
  // A gap that was chosen stays the same gap in the picture: from px or the former mm to the new mm.
  const gap = asked === 'auto' ? 'auto' : asked * (reading.mmPerPx === null ? 1 : 1 / reading.mmPerPx) * mmPerPx;
  const scaled = withScale({ ...reading, warnings: reading.warnings.filter((w) => w.code !== 'no-scale') }, given.pxToMm, given.source, scale.dpi === undefined && !scale.ruler ? scale.sheet?.cornersPx : undefined);
  return regroup(scaled, gap, reading.grouping?.corrections ?? NO_CORRECTIONS);
}

/** The reading's parts measured by a scale; sentiments are not touched and must be grouped afresh. */
export function withScale(reading: Reading, pxToMm: Homography, source: Reading['scaleSource'], sheetPx: Point[] | undefined): Reading {
  const mmPerPx = localScale(pxToMm, { x: reading.widthPx / 2, y: reading.heightPx / 2 });
  const sheet = new Sheet(pxToMm);
  const measured = (part: ReadPart) => measure(part, sheet);
  return {
    ...reading, pxToMm, mmPerPx, scaleSource: source,
    parts: reading.parts.map(measured),
    undivided: reading.undivided?.map(measured),
    ...(sheetPx ? { sheetPx } : {}),
  };
}

function measure(part: ReadPart, sheet: Sheet): ReadPart {
  const outline = sheet.outline(part.outlinePx), areaPx2 = outlineArea(part.outlinePx);
  return { ...part, areaMm2: areaPx2 > 0 ? (part.areaPx2 * outlineArea(outline)) / areaPx2 : 0, thinnestStrokeMm: thinnestStroke(outline) };
}

/** Picture and true sheet; both are the picture while no scale is known. */
class Sheet {
  private readonly map: Homography | null;
  private readonly back: Homography | null;

  constructor(pxToMm: Homography | null) {
    this.map = pxToMm;
    this.back = pxToMm && invertHomography(pxToMm);
  }
  get known(): boolean {
    return this.map !== null;
  }
  outline(px: Outline): Outline {
    const { map } = this;
    return map ? mapOutline(px, (p) => applyHomography(map, p)) : px;
  }
  toPx(p: Point): Point {
    return this.back ? applyHomography(this.back, p) : p;
  }
  pxDistance(a: Point, b: Point): number {
    const p = this.toPx(a), q = this.toPx(b);
    return Math.hypot(q.x - p.x, q.y - p.y);
  }
}

/** Starts from the parts as they were read, so that a withdrawn split gives the whole part back. */
function divideParts(reading: Reading, corrections: Corrections, sheet: Sheet): { parts: ReadPart[]; undivided: ReadPart[] } {
  const whole = [...reading.parts.filter((p) => p.dividedFrom === undefined), ...(reading.undivided ?? [])].sort((a, b) => a.id - b.id);
  if (corrections.splits.length === 0) return { parts: whole, undivided: [] };
  let nextId = 1 + Math.max(-1, ...whole.map((p) => p.id));
  const parts: ReadPart[] = [], undivided: ReadPart[] = [];
  const pieces: ReadPart[] = [];
  for (const part of whole) {
    const lines = corrections.splits.filter((line) => touchesBox(part.boxPx, line));
    const outlines = lines.length === 0 ? [part.outlinePx] : divideOutline(part.outlinePx, lines);
    if (outlines.length === 1) { parts.push(part); continue; }
    undivided.push(part);
    const total = outlines.reduce((sum, o) => sum + outlineArea(o), 0) || 1;
    for (const outlinePx of outlines) {
      const share = outlineArea(outlinePx) / total;
      const piece: ReadPart = { id: nextId++, boxPx: outlineBox(outlinePx), areaPx2: part.areaPx2 * share, areaMm2: null, outlinePx, thinnestStrokeMm: null, dividedFrom: part.id };
      pieces.push(sheet.known ? measure(piece, sheet) : piece);
    }
  }
  return { parts: [...parts, ...pieces], undivided };
}

function touchesBox(box: Box, line: { from: Point; to: Point }): boolean {
  const { from, to } = line;
  return Math.max(from.x, to.x) >= box.x && Math.min(from.x, to.x) <= box.x + box.w && Math.max(from.y, to.y) >= box.y && Math.min(from.y, to.y) <= box.y + box.h;
}

function nearestPart(parts: readonly ReadPart[], p: Point): number {
  let nearest = -1, least = Infinity;
  parts.forEach((part, i) => {
    const box = part.boxPx;
    const bound = Math.hypot(Math.max(0, box.x - p.x, p.x - box.x - box.w), Math.max(0, box.y - p.y, p.y - box.y - box.h));
    if (bound >= least) return;
    const distance = distanceToOutline(p, part.outlinePx);
    if (distance < least) { least = distance; nearest = i; }
  });
  return nearest;
}

/** With the sheet's corners known, ink is what lies on the sheet; its own edge and the desk are not. */
function isOutside(reading: Reading, part: ReadPart): boolean {
  const corners = reading.sheetPx;
  return corners !== undefined && part.outlinePx.rings[0].some((p) => !ringContains(corners, p));
}

/** `links` are those that the gap, or the relative rule, leaves whole. */
function groupParts(parts: readonly ReadPart[], kept: readonly number[], links: readonly Link[], corrections: Corrections, sheet: Sheet): number[][] {
  const sets = new DisjointSets(parts.length);
  for (const link of links) {
    const from = sheet.toPx(link.from), to = sheet.toPx(link.to);
    if (!corrections.splits.some((line) => segmentsCross(from, to, line.from, line.to))) sets.join(link.a, link.b);
  }
  const keptSet = new Set(kept);
  for (const places of corrections.joins) {
    const named = places.map((p) => nearestPart(parts, p)).filter((i) => keptSet.has(i));
    for (const i of named) sets.join(named[0], i);
  }
  const groups = new Map<number, number[]>();
  for (const i of kept) {
    const leader = sets.find(i);
    const group = groups.get(leader);
    if (group) group.push(i); else groups.set(leader, [i]);
  }
  return [...groups.values()];
}

function describe(parts: readonly ReadPart[], outlines: readonly Outline[], groups: readonly number[][], mmPerPx: number | null): ReadSentiment[] {
  const leans = findLeans(groups.map((group) => group.map((i) => outlines[i])), mmPerPx ?? 1);
  const sentiments = groups.map((group, g): ReadSentiment => {
    const own = group.map((i) => parts[i]);
    const boxPx = outlineBox({ rings: own.flatMap((part) => part.outlinePx.rings) });
    const partIds = own.map((part) => part.id), angleDeg = leans[g];
    if (mmPerPx === null) return { partIds, boxPx, widthMm: null, heightMm: null, angleDeg, outline: null, inkAreaMm2: null, thinnestStrokeMm: null };
    const level = levelOutline(group.map((i) => outlines[i]), angleDeg), box = outlineBox(level);
    const strokes = own.map((part) => part.thinnestStrokeMm).filter((w) => w !== null);
    return {
      partIds, boxPx, widthMm: box.w, heightMm: box.h, angleDeg, outline: level,
      inkAreaMm2: own.reduce((sum, part) => sum + (part.areaMm2 ?? 0), 0),
      thinnestStrokeMm: strokes.length === 0 ? null : Math.min(...strokes),
    };
  });
  return inReadingOrder(sentiments);
}

function levelOutline(outlines: readonly Outline[], angleDeg: number): Outline {
  const rings = outlines.flatMap((o) => o.rings).map((ring) => simplifyRing(ring.map((p) => rotatePoint(p, -angleDeg)), OUTLINE_TOLERANCE_MM)).filter((ring) => ring.length >= 3);
  const box = outlineBox({ rings });
  return { rings: rings.map((ring) => ring.map((p) => ({ x: p.x - box.x, y: p.y - box.y }))) };
}

/** Rows from top to bottom, in each from left to right; a sentiment is in a row where its middle is level with the row's first. */
function inReadingOrder(sentiments: ReadSentiment[]): ReadSentiment[] {
  const waiting = [...sentiments].sort((a, b) => a.boxPx.y - b.boxPx.y || a.boxPx.x - b.boxPx.x);
  const ordered: ReadSentiment[] = [];
  while (waiting.length > 0) {
    const { y, h } = waiting[0].boxPx;
    const inRow = (s: ReadSentiment) => s === waiting[0] || s.boxPx.y + s.boxPx.h / 2 < y + h;
    const row = waiting.filter(inRow).sort((a, b) => a.boxPx.x - b.boxPx.x);
    ordered.push(...row);
    for (const s of row) waiting.splice(waiting.indexOf(s), 1);
  }
  return ordered;
}
