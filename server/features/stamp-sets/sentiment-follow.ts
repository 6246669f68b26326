/**
 * How the rows of a picture's sentiments follow its reading: which sentiment is which row, by their places in the picture, so
 * that name, words and edits stay with the ink they belong to. Pure; coordinates are shares of the picture's width and height,
 * which outlive a picture of another resolution. Sizes mm.
 */
import type { Scale } from '../../contract/stamp-sets.ts';
import { matchBoxes } from '../../engine/geometry/box-match.ts';
import { outlineBox } from '../../engine/geometry/ring.ts';
import { mapOutline, rotateOutline } from '../../engine/geometry/transform.ts';
import type { Box, Outline, Point } from '../../engine/geometry/types.ts';
import { applyScale, regroup } from '../../engine/reading/grouping.ts';
import type { Corrections, Reading, ReadSentiment } from '../../engine/reading/types.ts';

/** Overlap from which a row goes with a sentiment. A joined one still carries on its larger half; a shifted line of text does not. */
const SAME_PLACE = 0.1;
/** Rows that an earlier grouping gave come back only where the sentiment is nearly the same again. */
const SAME_AS_BEFORE = 0.6;
/** Rounding of stored outlines, mm: a fiftieth of what they are simplified by. */
const STORED_MM = 0.001;

export interface Wishes { scale: Scale; groupingGap: 'auto' | number; corrections: Corrections }

/** The reading under the person's scale, gap and corrections. */
export function correctedReading(base: Reading, wishes: Wishes): Reading {
  const scaled = wishes.scale.kind === 'file' ? base : applyScale(base, scaleOptions(wishes.scale));
  return regroup(scaled, wishes.groupingGap, wishes.corrections);
}

/** What rows of sentiments are made of; far smaller than the reading. */
export interface GroupedSentiments { widthPx: number; heightPx: number; sentiments: ReadSentiment[]; aside: ReadSentiment[] }

/** Runs in a worker thread: a full sheet takes the better part of a second. */
export function groupSentiments({ base, wishes }: { base: Reading; wishes: Wishes }): GroupedSentiments {
  const { widthPx, heightPx, sentiments } = correctedReading(base, wishes);
  if (wishes.corrections.setAside.length === 0) return { widthPx, heightPx, sentiments, aside: [] };
  const everything = correctedReading(base, { ...wishes, corrections: { ...wishes.corrections, setAside: [] } });
  const kept = new Set(sentiments.flatMap(({ partIds }) => partIds));
  return { widthPx, heightPx, sentiments, aside: everything.sentiments.filter(({ partIds }) => !partIds.some((part) => kept.has(part))) };
}

function scaleOptions(scale: Exclude<Scale, { kind: 'file' }>): Parameters<typeof applyScale>[1] {
  if (scale.kind === 'typed') return { dpi: scale.dpi };
  if (scale.kind === 'ruler') return { ruler: { from: scale.from, to: scale.to, lengthMm: scale.lengthMm } };
  return { sheet: { cornersPx: scale.cornersPx, widthMm: scale.widthMm, heightMm: scale.heightMm } };
}

export interface KnownSentiment { id: string; place: Box | null; present: boolean; uprightDeg: number | null }

export interface FollowedSentiment {
  /** Null: a new row. */
  id: string | null;
  present: boolean; setAside: boolean; number: number; place: Box;
  widthMm: number | null; heightMm: number | null; artwork: Outline | null;
  angleDeg: number; inkAreaMm2: number | null; thinnestStrokeMm: number | null;
}

/** One entry for each sentiment and for each that is set aside; rows that the reading does not give any more are not among them. */
export function followReading(grouped: GroupedSentiments, known: readonly KnownSentiment[]): FollowedSentiment[] {
  const found = [...grouped.sentiments.map((s) => ({ s, setAside: false })), ...grouped.aside.map((s) => ({ s, setAside: true }))];
  const places = found.map(({ s }) => placeOf(s.boxPx, grouped));
  const ids = rowsByPlace(places, known);
  return found.map(({ s, setAside }, i) => {
    const row = known.find(({ id }) => id === ids[i]);
    return {
      id: ids[i], present: true, setAside, number: i + 1, place: places[i],
      ...sized(s, row?.uprightDeg ?? null),
      angleDeg: s.angleDeg, inkAreaMm2: s.inkAreaMm2, thinnestStrokeMm: s.thinnestStrokeMm,
    };
  });
}

function rowsByPlace(places: Box[], known: readonly KnownSentiment[]): (string | null)[] {
  const present = known.filter((row) => row.present && row.place !== null);
  const hidden = known.filter((row) => !row.present && row.place !== null);
  // A row that was hidden and fits exactly goes before one at hand that fits roughly: undoing a join gives both their own again.
  const exact = matchBoxes([...present, ...hidden].map((row) => row.place!), places, 0.98);
  const ids = exact.map((row) => (row === null ? null : [...present, ...hidden][row].id));
  for (const [rows, least] of [[present, SAME_PLACE], [hidden, SAME_AS_BEFORE]] as const) {
    const free = rows.filter(({ id }) => !ids.includes(id));
    const open = ids.flatMap((id, i) => (id === null ? [i] : []));
    matchBoxes(free.map((row) => row.place!), open.map((i) => places[i]), least).forEach((row, o) => {
      if (row !== null) ids[open[o]] = free[row].id;
    });
  }
  return ids;
}

export function placeOf(box: Box, picture: { widthPx: number; heightPx: number }): Box {
  const share = (value: number, whole: number) => Math.round((value / whole) * 1e6) / 1e6;
  return { x: share(box.x, picture.widthPx), y: share(box.y, picture.heightPx), w: share(box.w, picture.widthPx), h: share(box.h, picture.heightPx) };
}

function sized(sentiment: ReadSentiment, uprightDeg: number | null): Pick<FollowedSentiment, 'widthMm' | 'heightMm' | 'artwork'> {
  if (sentiment.outline === null || sentiment.widthMm === null || sentiment.heightMm === null) return { widthMm: null, heightMm: null, artwork: null };
  return setUpright(sentiment.outline, uprightDeg === null ? 0 : sentiment.angleDeg - uprightDeg);
}

/** Turned clockwise, its box again at the origin. */
export function setUpright(outline: Outline, turnDeg: number): { widthMm: number; heightMm: number; artwork: Outline } {
  const turned = turnDeg === 0 ? outline : rotateOutline(outline, turnDeg);
  const box = outlineBox(turned);
  const round = (value: number) => Math.round(value / STORED_MM) * STORED_MM;
  const stored = (value: number) => Number(round(value).toFixed(3));
  return { widthMm: stored(box.w), heightMm: stored(box.h), artwork: mapOutline(turned, (p) => ({ x: stored(p.x - box.x), y: stored(p.y - box.y) })) };
}

export function typedOutline(widthMm: number, heightMm: number): Outline {
  return { rings: [[{ x: 0, y: 0 }, { x: widthMm, y: 0 }, { x: widthMm, y: heightMm }, { x: 0, y: heightMm }]] };
}

// ---- corrections that move with their picture

const mapCorrections = (corrections: Corrections, map: (p: Point) => Point): Corrections => ({
  joins: corrections.joins.map((points) => points.map(map)),
  splits: corrections.splits.map(({ from, to }) => ({ from: map(from), to: map(to) })),
  setAside: corrections.setAside.map(map),
});

function mapWishes(wishes: Wishes, map: (p: Point) => Point, corners: (of: [Point, Point, Point, Point]) => [Point, Point, Point, Point]): Wishes {
  const { scale } = wishes;
  const mapped: Scale = scale.kind === 'ruler' ? { ...scale, from: map(scale.from), to: map(scale.to) }
    : scale.kind === 'sheet' ? { ...scale, cornersPx: corners(scale.cornersPx.map(map) as [Point, Point, Point, Point]) }
    : scale;
  return { ...wishes, scale: mapped, corrections: mapCorrections(wishes.corrections, map) };
}

/** The same places after the picture was flipped left to right; the sheet's corners are named as they are read then. */
export function flipWishes(wishes: Wishes, widthPx: number): Wishes {
  return mapWishes(wishes, (p) => ({ x: widthPx - p.x, y: p.y }), ([tl, tr, br, bl]) => [tr, tl, bl, br]);
}

/** The same places in another picture of the same sheet: its frame is taken to show the same. A typed density belonged to the old file. */
export function resizeWishes(wishes: Wishes, from: { widthPx: number; heightPx: number }, to: { widthPx: number; heightPx: number }): Wishes {
  const kx = to.widthPx / from.widthPx, ky = to.heightPx / from.heightPx;
  const moved = mapWishes(wishes, (p) => ({ x: p.x * kx, y: p.y * ky }), (corners) => corners);
  return kx === 1 && ky === 1 ? moved : { ...moved, scale: { kind: 'file' } };
}

/** Share of the picture's diagonal within which a correction still finds the ink it was made for. */
const STILL_FITS = 0.01;

/** Corrections that still meet ink. The kernel takes the nearest part to a point, which in another picture may lie anywhere. */
export function fittingCorrections(corrections: Corrections, reading: Reading): Corrections {
  const reach = STILL_FITS * Math.hypot(reading.widthPx, reading.heightPx);
  const nearInk = (p: Point) => reading.parts.some(({ boxPx: b }) => p.x >= b.x - reach && p.x <= b.x + b.w + reach && p.y >= b.y - reach && p.y <= b.y + b.h + reach);
  const joins = corrections.joins.map((points) => points.filter(nearInk)).filter((points) => points.length >= 2);
  const splits = corrections.splits.filter(({ from, to }) => reading.sentiments.some(({ boxPx }) => segmentMeetsBox(from, to, boxPx)));
  return { joins, splits, setAside: corrections.setAside.filter(nearInk) };
}

/** Liang and Barsky 1984: the part of the segment's parameter that lies inside each slab. */
function segmentMeetsBox(from: Point, to: Point, box: Box): boolean {
  let enter = 0, leave = 1;
  for (const [start, along, low, high] of [[from.x, to.x - from.x, box.x, box.x + box.w], [from.y, to.y - from.y, box.y, box.y + box.h]]) {
    if (along === 0) {
      if (start < low || start > high) return false;
      continue;
    }
    const a = (low - start) / along, b = (high - start) / along;
    enter = Math.max(enter, Math.min(a, b));
    leave = Math.min(leave, Math.max(a, b));
  }
  return enter <= leave;
}
