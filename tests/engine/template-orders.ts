/** Orders with plans made by hand for the template tests: places on a grid, so that what must be on paper is known without the planner. Invented shapes. */
import { dieOutline } from '../../server/engine/fit/die-outline.ts';
import type { DieGeometry } from '../../server/engine/fit/types.ts';
import type { CutPass, Platform, Press, RunLine, RunOrder, RunPlan, Setup } from '../../server/engine/gangrun/types.ts';
import { circleArc } from '../../server/engine/geometry/arc.ts';
import { boxCentre, outlineBox } from '../../server/engine/geometry/ring.ts';
import type { Outline, Ring } from '../../server/engine/geometry/types.ts';
import type { PrinterProfile } from '../../server/engine/template/types.ts';

/** mulberry32, a public-domain generator of 32 bits: the same numbers on every machine. */
export function randomNumbers(seed: number): () => number {
  let a = seed >>> 0;
  return () => {
    a = (a + 0x6d2b79f5) >>> 0;
    let t = Math.imul(a ^ (a >>> 15), a | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

export const LETTER: PrinterProfile = {
  paper: { widthMm: 215.9, heightMm: 279.4 }, unprintable: { left: 4.2, right: 4.2, top: 4.2, bottom: 4.2 }, scale: { x: 1, y: 1 }, shift: { x: 0, y: 0 }, name: 'Desk printer',
};
export const A4: PrinterProfile = { ...LETTER, paper: { widthMm: 210, heightMm: 297 } };
export const TWELVE: PrinterProfile = { ...LETTER, paper: { widthMm: 304.8, heightMm: 304.8 } };
export const SMALL: PrinterProfile = { ...LETTER, paper: { widthMm: 127, heightMm: 177.8 } };

/** Words as a stamp has them: a row of letters, some with a hole, all feet on one line. */
export function artwork(random: () => number, widthMm: number, heightMm: number): Outline {
  const rings: Ring[] = [];
  const letters = 3 + Math.floor(random() * 4);
  const step = widthMm / letters;
  for (let i = 0; i < letters; i++) {
    const x = i * step, w = step * 0.78, top = i === 0 ? 0 : random() * heightMm * 0.3;
    if (random() < 0.5) rings.push([{ x, y: top }, { x: x + w, y: top }, { x: x + w, y: heightMm }, { x, y: heightMm }]);
    else rings.push(circleArc({ x: x + w / 2, y: heightMm - w / 2 }, w / 2, 0, 360).slice(0, -1));
    const inner = rings[rings.length - 1];
    const c = boxCentre(outlineBox({ rings: [inner] }));
    if (random() < 0.7) rings.push(inner.map((p) => ({ x: c.x + (p.x - c.x) * 0.5, y: c.y + (p.y - c.y) * 0.5 })));
  }
  return { rings };
}

const SHAPES: ((w: number, h: number) => DieGeometry)[] = [
  (w, h) => ({ shape: { kind: 'rectangle', widthMm: w, heightMm: h, cornerRadiusMm: 2 }, rimMm: 1.5 }),
  (w, h) => ({ shape: { kind: 'oval', widthMm: w, heightMm: h }, stitchInsetMm: 1.5, rimMm: 1.5 }),
  (w, h) => ({ shape: { kind: 'stadium', widthMm: w, heightMm: h }, rimMm: 1 }),
];

export interface SampleOptions { turns?: 1 | 2 | 4; setups?: number; corner?: Platform['corner']; hinge?: Platform['hinge']; bed?: { w: number; h: number }; sheet?: { w: number; h: number }; sheets?: number; columns?: number; rows?: number }

/** Every setup: a grid of places, each with a stamp and a die of its own, pressed in all turns on its sheets. */
export function sampleRun(seed: number, options: SampleOptions = {}): { order: RunOrder; plan: RunPlan } {
  const { turns = 1, setups: setupCount = 1, corner = 'top-left', hinge = 'left', bed = { w: 160, h: 170 }, sheet = { w: 139.7, h: 165.1 }, sheets = 3, columns = 2, rows = 3 } = options;
  const random = randomNumbers(seed);
  const stamps: RunOrder['stamps'] = [], dies: RunOrder['dies'] = [], lines: RunLine[] = [], setups: Setup[] = [], cutPasses: CutPass[] = [];
  const left = corner.endsWith('left') ? 0 : bed.w - sheet.w, top = corner.startsWith('top') ? 0 : bed.h - sheet.h;
  // Half a sheet for half turns: the other half is for the turned impressions.
  const area = { w: (sheet.w - 8) / (turns === 4 ? 2 : 1), h: (sheet.h - 8) / (turns === 1 ? 1 : 2) };
  const cell = { w: area.w / columns, h: area.h / rows };
  let sheetNumber = 1;
  for (let s = 0; s < setupCount; s++) {
    const placements: Setup['placements'] = [];
    for (let i = 0; i < columns * rows; i++) {
      const id = `${s}-${i}`;
      const size = { w: cell.w - 4 - random() * 4, h: cell.h - 4 - random() * 3 };
      const ink = artwork(random, size.w * (0.5 + random() * 0.15), size.h * (0.3 + random() * 0.2));
      const geometry = SHAPES[Math.floor(random() * SHAPES.length)](size.w, size.h);
      const middle = boxCentre(outlineBox(dieOutline(geometry)));
      const centre = { x: middle.x + random() - 0.5, y: middle.y + random() - 0.5 };
      stamps.push({ id: `stamp ${id}`, artwork: ink, trimMm: 1.5, owned: 1 });
      dies.push({ id: `die ${id}`, geometry, owned: 1 });
      lines.push({ id: `line ${id}`, pieces: [{ stampId: `stamp ${id}`, centre, rotationDeg: 0, inkId: i % 2 === 0 ? 'ink a' : 'ink b' }], dieId: `die ${id}`, quantity: sheets * turns, overs: 0, mayTurn: true });
      const turned = random() < 0.3;
      const q = turned ? { x: -(centre.x - middle.x), y: -(centre.y - middle.y) } : { x: centre.x - middle.x, y: centre.y - middle.y };
      placements.push({
        id: 10 + i, stamps: [{ stampId: `stamp ${id}`, copy: 1 }], lineIds: [`line ${id}`], rotationDeg: turned ? 180 : 0,
        x: left + 4 + (i % columns + 0.5) * cell.w + q.x, y: top + 4 + (Math.floor(i / columns) + 0.5) * cell.h + q.y,
      });
    }
    const presses: Press[] = [];
    for (let k = 0; k < sheets; k++, sheetNumber++) {
      for (let turn = 0; turn < turns; turn++) {
        const inked = placements.map((p) => ({ placement: p.id, lineId: p.lineIds[0] }));
        presses.push({ sheet: sheetNumber, turn, takeOff: [], inked });
        cutPasses.push({ sheet: sheetNumber, strip: 0, cuts: placements.map((p, i) => ({ dieId: `die ${s}-${i}`, dieCopy: 1, placement: p.id, turn, lineId: p.lineIds[0] })) });
      }
    }
    setups.push({ turns, placements, stripCuts: [], presses });
  }
  const figures = { setups: setupCount, presses: setupCount * sheets * turns, sheets: setupCount * sheets, cutPasses: cutPasses.length, minutes: 30 };
  return {
    order: {
      sheet: { widthMm: sheet.w, heightMm: sheet.h, marginMm: 3 }, platform: { widthMm: bed.w, heightMm: bed.h, keepOuts: [{ x: bed.w - 12, y: bed.h / 2 - 6, w: 12, h: 12 }], corner, hinge },
      gapMm: 3, turnToleranceMm: 0.5, stamps, dies, inks: [{ id: 'ink a', clearMm: 5 }, { id: 'ink b', clearMm: 5 }], lines, turns: 'auto', aim: 'time', seed: 1,
    },
    plan: { setups, cutPasses, totals: { ...figures, wastePercent: 40 }, atLeast: figures, unplaced: [], stopped: false },
  };
}

export const SAMPLE_LABELS = {
  batchName: 'Thirty spring cards', cardstockName: 'White, 300 g', benchUrl: 'https://bench.example/studios/7/batches/12/bench',
  inks: { 'ink a': { name: 'Dark blue', colour: '#22304A', dryingMinutes: 5, kind: 'dye' }, 'ink b': { name: 'Warm red', colour: '#B5364B', dryingMinutes: 20, kind: 'pigment' } },
  sentiments: { 'stamp 0-0': { name: 'Thank you', words: 'thank you' }, 'stamp 0-1': { name: 'Zażółć gęślą', words: 'zażółć' } },
  dies: { 'die 0-0': { name: 'Label no. 3' } },
};
