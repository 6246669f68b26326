/** Orders to plan: made by hand for known cases, and at random from a seed. Shapes are plain; what matters is what the order asks. */
import type { RunLine, RunOrder } from '../../server/engine/gangrun/index.ts';

export const rectangle = (w: number, h: number) => ({ rings: [[{ x: 0, y: 0 }, { x: w, y: 0 }, { x: w, y: h }, { x: 0, y: h }]] });

export function seeded(seed: number): () => number {
  let state = seed | 0;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** One stamp a label, in the middle of its die; sizes of the cut line in mm. */
export function order(labels: { w: number; h: number; count: number; ink?: string }[], more: Partial<RunOrder> = {}): RunOrder {
  return {
    sheet: { widthMm: 139.7, heightMm: 165.1, marginMm: 3 }, platform: { widthMm: 160, heightMm: 170, keepOuts: [] }, gapMm: 2, turnToleranceMm: 1,
    stamps: labels.map(({ w, h }, i) => ({ id: `s${i}`, artwork: rectangle(w * 0.6, h * 0.4), trimMm: 1, owned: 1 })),
    dies: labels.map(({ w, h }, i) => ({ id: `d${i}`, geometry: { shape: { kind: 'rectangle', widthMm: w, heightMm: h } }, owned: 1 })),
    inks: [{ id: 'night', clearMm: 4 }, { id: 'berry', clearMm: 7 }],
    lines: labels.map(({ w, h, count, ink = 'night' }, i): RunLine => ({
      id: `l${i}`, pieces: [{ stampId: `s${i}`, centre: { x: w / 2, y: h / 2 }, rotationDeg: 0, inkId: ink }], dieId: `d${i}`, quantity: count, overs: 0, mayTurn: true,
    })),
    turns: 'none', aim: 'time', seed: 1, ...more,
  };
}

/** Packing by itself: no margin, a bed as large as the sheet, ink well inside, one label of each. */
export function packingOrder(sizes: { w: number; h: number }[], sheet: { w: number; h: number }, more: Partial<RunOrder> = {}): RunOrder {
  return order(sizes.map((size) => ({ ...size, count: 1 })), {
    sheet: { widthMm: sheet.w, heightMm: sheet.h, marginMm: 0 }, platform: { widthMm: sheet.w, heightMm: sheet.h, keepOuts: [] }, gapMm: 0, turnToleranceMm: 0, aim: 'sheets',
    stamps: sizes.map(({ w, h }, i) => ({ id: `s${i}`, artwork: rectangle(w * 0.3, h * 0.3), trimMm: 0, owned: 1 })), inks: [{ id: 'night', clearMm: 0 }], ...more,
  });
}

/** Every kind of demand at once: shapes, quantities, overs, copies, inks, keep-outs, corners, feed, turns, shared stamps, combined sentiments. */
export function randomOrder(seed: number, most = 12): RunOrder {
  const next = seeded(seed);
  const pick = <T>(list: readonly T[]): T => list[Math.floor(next() * list.length)];
  const square = next() < 0.3;
  const sheet = square ? { widthMm: 152.4, heightMm: 152.4, marginMm: 3 } : pick([{ widthMm: 139.7, heightMm: 165.1, marginMm: 3 }, { widthMm: 107.95, heightMm: 139.7, marginMm: 2 }, { widthMm: 200, heightMm: 150, marginMm: 4 }]);
  const dies = Array.from({ length: 3 }, (_, i): RunOrder['dies'][number] => {
    const w = 32 + next() * 40, h = 15 + next() * 15;
    return { id: `d${i}`, geometry: { shape: { kind: pick(['rectangle', 'oval', 'stadium'] as const), widthMm: w, heightMm: h }, rimMm: next() < 0.5 ? 1.5 : 0 }, owned: 1 + Math.floor(next() * 2) };
  });
  const box = (die: RunOrder['dies'][number]) => die.geometry.shape as { widthMm: number; heightMm: number };
  const stamps: RunOrder['stamps'] = [], lines: RunLine[] = [];
  const addStamp = (w: number, h: number) => {
    stamps.push({ id: `s${stamps.length}`, artwork: rectangle(w, h), trimMm: 1, owned: next() < 0.2 ? 2 : 1 });
    return stamps[stamps.length - 1].id;
  };
  const count = 2 + Math.floor(next() * (most - 1));
  for (let i = 0; i < count; i++) {
    const die = pick(dies), { widthMm: w, heightMm: h } = box(die), inkId = pick(['night', 'night', 'berry']);
    const combined = next() < 0.12;
    const pieces = combined
      ? [-0.18, 0.18].map((at) => ({ stampId: addStamp(w * 0.2, h * 0.3), centre: { x: w * (0.5 + at), y: h / 2 }, rotationDeg: 0, inkId }))
      : [{ stampId: addStamp(w * 0.55, h * 0.35), centre: { x: w / 2, y: h / 2 }, rotationDeg: 0, inkId }];
    const line: RunLine = { id: `l${lines.length}`, pieces, dieId: die.id, quantity: 1 + Math.floor(next() * 8), overs: Math.floor(next() * 2), mayTurn: next() < 0.6, cut: next() < 0.1 ? 'straight' : 'die' };
    lines.push(line);
    // The same stamp in another ink shares its place.
    if (!combined && next() < 0.15) lines.push({ ...line, id: `l${lines.length}`, pieces: pieces.map((piece) => ({ ...piece, inkId: 'berry' })), quantity: 1 + Math.floor(next() * 3) });
  }
  return {
    sheet, platform: { widthMm: 200, heightMm: 200, keepOuts: next() < 0.3 ? [{ x: 60, y: 60, w: 10, h: 10 }] : [], corner: pick(['top-left', 'top-right', 'bottom-left', 'bottom-right'] as const) },
    gapMm: 1.5, turnToleranceMm: 1, maxFeedWidthMm: next() < 0.2 ? 105 : undefined, stamps, dies, inks: [{ id: 'night', clearMm: 3 }, { id: 'berry', clearMm: 6 }], lines,
    turns: pick(['auto', 'auto', 'none', 'half', square ? 'quarter' : 'half'] as const), aim: pick(['time', 'sheets'] as const), seed,
  };
}
