/**
 * A stamp sheet with known truth: sentiments from a half's wordings and fonts, some with ornaments or frames, laid out so that each stands
 * at least `ratio` × the sheet's largest inner gap from every other, and most hardly farther.
 *
 * Gaps are true nearest distances between ink. The tuning half fills shelves from the left, the report half scatters.
 */
import { boxDistance, outlineGap, spanningLinks } from '../../../server/engine/reading/gaps.ts';
import { outlineBox } from '../../../server/engine/geometry/ring.ts';
import { tidyOutline } from '../../../server/engine/geometry/offset.ts';
import { Clipper, FillRule, type Path64 } from 'clipper2-ts';
import type { Box, Outline, Ring } from '../../../server/engine/geometry/types.ts';
import { drawLettering, type FontName } from './lettering.ts';
import { dots, flourish, frame, heart, rule, star } from './ornaments.ts';
import type { Random } from './random.ts';
import { vocabulary, type Half } from './wordings.ts';

export interface TrueSentiment {
  words: string;
  /** On the sheet, mm; even-odd. */
  rings: Ring[];
  box: Box;
  innerGapMm: number;
}
export interface MadeSheet {
  widthMm: number;
  heightMm: number;
  sentiments: TrueSentiment[];
  largestInnerGapMm: number;
}
export type Spacing = 'easy' | 'hard';
/** What the ratio is of: the largest inner gap of the whole sheet, or of the two neighbours, so that no one gap serves the sheet. */
export type Measure = 'sheet' | 'neighbours';

const SPACING_RATIO: Record<Spacing, [number, number]> = { easy: [1.6, 2.1], hard: [1.15, 1.5] };

/** Least distance between two sentiments, from their largest inner gaps. */
type Clear = (innerGapMm: number, otherInnerGapMm: number) => number;
/** Stamps must be cut apart: words in one piece keep this distance. */
const LEAST_CLEAR_MM = 1.5;

interface Draft { words: string; rings: Ring[]; box: Box; innerGapMm: number }

export function makeSheet(random: Random, half: Half, spacing: Spacing, sizeMm: { w: number; h: number }, measure: Measure = 'sheet'): MadeSheet {
  // Many makers set a whole sheet in one or two types, others every sentiment in another.
  const fonts = random.next() < 0.35 ? [random.pick(vocabulary[half].fonts), random.pick(vocabulary[half].fonts)] : vocabulary[half].fonts;
  const drafts = Array.from({ length: 26 }, () => draft(random, half, fonts));
  const largestInnerGapMm = Math.max(...drafts.slice(0, 14).map((d) => d.innerGapMm));
  const usable = drafts.filter((d) => d.innerGapMm <= largestInnerGapMm);
  const ratio = random.between(...SPACING_RATIO[spacing]);
  const clear: Clear = measure === 'sheet' ? () => ratio * largestInnerGapMm : (a, b) => ratio * Math.max(a, b, LEAST_CLEAR_MM);
  const sentiments = half === 'tuning' ? shelve(random, usable, clear, sizeMm) : scatter(random, usable, clear, sizeMm);
  return { widthMm: sizeMm.w, heightMm: sizeMm.h, sentiments, largestInnerGapMm };
}

function draft(random: Random, half: Half, fonts: readonly FontName[]): Draft {
  const { wordings } = vocabulary[half];
  const words = random.pick(wordings), lines = words.split('|');
  const capitals = /^[A-Z &|]+$/.test(words);
  const drawing = drawLettering({
    lines, font: random.pick(fonts), sizeMm: random.between(4.5, 13),
    tracking: capitals && random.next() < 0.6 ? random.between(0.1, 0.35) : 0,
    leading: random.between(0.95, 1.25), align: random.next() < 0.8 ? 'middle' : 'left',
  });
  const rings = united(decorate(random, drawing.rings, drawing.box));
  const box = outlineBox({ rings });
  const innerGapMm = Math.max(0, ...spanningLinks(separate(rings)).map((l) => l.distance));
  return { words: lines.join(' '), rings, box, innerGapMm };
}

function decorate(random: Random, words: Ring[], box: Box): Ring[] {
  const at = (rings: Ring[], x: number, y: number) => rings.map((ring) => ring.map((p) => ({ x: p.x + x, y: p.y + y })));
  const room = random.between(1, 2.4), middle = box.w / 2;
  switch (random.whole(0, 11)) {
    case 0: return [...words, ...at([heart(random.between(2.5, 5))], middle, -room - 3)];
    case 1: return [...words, ...at([star(random.between(1.2, 2.5))], box.w + room + 2.5, box.h / 2)];
    case 2: return [...words, ...at([rule(box.w * 0.7, random.between(0.2, 0.5))], box.w * 0.15, box.h + room)];
    case 3: return [...words, ...at([flourish(box.w * 0.8, random.between(0.2, 0.45))], box.w * 0.1, box.h + room + box.w * 0.05)];
    case 4: return [...words, ...at(dots(5, random.between(1.4, 2.2), random.between(0.3, 0.5)), middle - 4, box.h + room + 0.5)];
    case 5: {
      const pad = random.between(1.2, 2.5);
      return [...words, ...at(frame(box.w + 2 * pad, box.h + 2 * pad, random.between(0.25, 0.7)), -pad, -pad)];
    }
    default: return words;
  }
}

/** Letters of a script overlap; what is printed is their union, with the frame's inner edge a hole. */
function united(rings: Ring[]): Ring[] {
  const units = 1e4;
  const toPath = (ring: Ring): Path64 => ring.map((p) => ({ x: Math.round(p.x * units), y: Math.round(p.y * units), z: 0 }));
  return Clipper.union(orient(rings).map(toPath), FillRule.NonZero).map((path) => path.map((p) => ({ x: p.x / units, y: p.y / units })));
}

/** A frame's inner ring runs the other way, so that it stays a hole under non-zero filling. */
function orient(rings: Ring[]): Ring[] {
  return rings.map((ring, i) => (i > 0 && isFrameHole(ring, rings[i - 1]) ? [...ring].reverse() : ring));
}
function isFrameHole(inner: Ring, outer: Ring): boolean {
  if (inner.length !== 4 || outer.length !== 4) return false;
  const a = outlineBox({ rings: [inner] }), b = outlineBox({ rings: [outer] });
  return a.x > b.x && a.y > b.y && a.x + a.w < b.x + b.w && a.y + a.h < b.y + b.h;
}

/** Connected pieces: each outer ring with its holes. */
export function separate(rings: Ring[]): Outline[] {
  const tidy = tidyOutline({ rings }).rings;
  const area = (ring: Ring) => ring.reduce((sum, p, i) => { const q = ring[(i + 1) % ring.length]; return sum + p.x * q.y - q.x * p.y; }, 0);
  const sign = Math.sign(area(tidy.reduce((a, b) => (Math.abs(area(a)) > Math.abs(area(b)) ? a : b), tidy[0])));
  const outers = tidy.filter((ring) => Math.sign(area(ring)) === sign), holes = tidy.filter((ring) => Math.sign(area(ring)) !== sign);
  const boxes = outers.map((ring) => outlineBox({ rings: [ring] }));
  const pieces = outers.map((ring): Outline => ({ rings: [ring] }));
  for (const hole of holes) {
    const h = outlineBox({ rings: [hole] });
    // The smallest outer ring round it; boxes are enough to tell for letters and frames.
    let owner = -1;
    boxes.forEach((b, i) => { if (b.x <= h.x && b.y <= h.y && b.x + b.w >= h.x + h.w && b.y + b.h >= h.y + h.h && (owner < 0 || b.w * b.h < boxes[owner].w * boxes[owner].h)) owner = i; });
    if (owner >= 0) pieces[owner].rings.push(hole);
  }
  return pieces;
}

const EDGE_MM = 6;

function placed(d: Draft, x: number, y: number): TrueSentiment {
  const dx = x - d.box.x, dy = y - d.box.y;
  return { words: d.words, rings: d.rings.map((ring) => ring.map((p) => ({ x: p.x + dx, y: p.y + dy }))), box: { ...d.box, x, y }, innerGapMm: d.innerGapMm };
}

function isClear(candidate: TrueSentiment, others: readonly TrueSentiment[], clear: Clear): boolean {
  return others.every((o) => {
    const least = clear(candidate.innerGapMm, o.innerGapMm), boxes = boxDistance(o.box, candidate.box);
    return boxes >= least || (boxes > least * 0.2 && outlineGap({ rings: o.rings }, { rings: candidate.rings }).distance >= least);
  });
}

function shelve(random: Random, drafts: readonly Draft[], clear: Clear, size: { w: number; h: number }): TrueSentiment[] {
  const done: TrueSentiment[] = [];
  let x = EDGE_MM, y = EDGE_MM, shelf = 0;
  for (const d of drafts) {
    if (x + d.box.w > size.w - EDGE_MM) { x = EDGE_MM; y += shelf + clear(d.innerGapMm, d.innerGapMm) * looseness(random); shelf = 0; }
    if (y + d.box.h > size.h - EDGE_MM || x + d.box.w > size.w - EDGE_MM) continue;
    let sentiment = placed(d, x, y);
    for (let nudge = 0; nudge < 40 && !isClear(sentiment, done, clear); nudge++) sentiment = placed(d, x + nudge * 0.5, y);
    if (!isClear(sentiment, done, clear) || sentiment.box.x + d.box.w > size.w - EDGE_MM) continue;
    done.push(sentiment);
    x = sentiment.box.x + d.box.w + clear(d.innerGapMm, d.innerGapMm) * looseness(random);
    shelf = Math.max(shelf, d.box.h);
  }
  return done;
}

/** Half of the neighbours stand as near as they may, others up to twice as far. */
function looseness(random: Random): number {
  return random.next() < 0.5 ? 1 : random.between(1, 2);
}

function scatter(random: Random, drafts: readonly Draft[], clear: Clear, size: { w: number; h: number }): TrueSentiment[] {
  const done: TrueSentiment[] = [];
  for (const d of drafts) {
    let best: TrueSentiment | null = null, bestAir = Infinity;
    for (let attempt = 0; attempt < 160; attempt++) {
      if (d.box.w > size.w - 2 * EDGE_MM || d.box.h > size.h - 2 * EDGE_MM) break;
      const candidate = placed(d, random.between(EDGE_MM, size.w - EDGE_MM - d.box.w), random.between(EDGE_MM, size.h - EDGE_MM - d.box.h));
      const air = done.length === 0 ? 0 : Math.min(...done.map((o) => boxDistance(o.box, candidate.box)));
      // The first stands anywhere; each next as near to the others as it may.
      if (air < bestAir && isClear(candidate, done, clear)) { best = candidate; bestAir = air; }
    }
    if (best) done.push(best);
  }
  return done;
}
