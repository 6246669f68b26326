/**
 * From places and counts to a run: presses in order, sheets, stamps that come off, cut passes, totals.
 *
 * A place makes one label a press until its count is reached, beginning with the first press, so stamps come off one after the
 * other and the lid is never inked for nothing. Lines that share a place are made one after the other, those of one ink
 * together, so that no stamp changes its ink more often than it must.
 */
import type { Ring } from '../geometry/types.ts';
import { ringBox } from '../geometry/ring.ts';
import { translateRing } from '../geometry/convex.ts';
import { cutPassesOf } from './cut-passes.ts';
import type { LabelToCut } from './cut-passes.ts';
import { turnRing } from './layout.ts';
import { placeShape } from './place-geometry.ts';
import type { OrderShapes } from './place-geometry.ts';
import type { SheetFrame } from './sheet-frame.ts';
import { stripOf } from './strips.ts';
import type { CutPass, Pace, Placement, Press, RunPlan, RunTotals, Setup } from './types.ts';

export const DEFAULT_PACE: Pace = { setup: 4, perStamp: 1 / 3, press: 1 / 2, perInked: 8 / 60, cutPass: 3 / 4 };

/** How many labels of each line a place makes, in the order they are made. */
export type Share = { lineId: string; count: number }[];
export interface SetupDraft { turns: Setup['turns']; placements: Placement[]; stripCuts: Setup['stripCuts']; /** By placement. */ shares: Share[] }

export function makePresses(draft: SetupDraft, firstSheet: number): Press[] {
  const runs = draft.shares.map((share) => share.flatMap(({ lineId, count }) => Array.from({ length: count }, () => lineId)));
  const presses = Math.max(0, ...runs.map((run) => run.length));
  return Array.from({ length: presses }, (_, press): Press => ({
    sheet: firstSheet + Math.floor(press / draft.turns),
    turn: press % draft.turns,
    takeOff: draft.placements.flatMap((placement, i) => (press > 0 && runs[i].length === press ? [placement.id] : [])),
    inked: draft.placements.flatMap((placement, i) => (press < runs[i].length ? [{ placement: placement.id, lineId: runs[i][press] }] : [])),
  }));
}

export function makePlan(shapes: OrderShapes, frame: SheetFrame, drafts: readonly SetupDraft[]): Pick<RunPlan, 'setups' | 'cutPasses' | 'totals'> {
  let sheet = 1;
  const setups: Setup[] = [];
  const cutPasses: CutPass[] = [];
  for (const draft of drafts) {
    const presses = makePresses(draft, sheet);
    setups.push({ turns: draft.turns, placements: draft.placements, stripCuts: draft.stripCuts, presses });
    cutPasses.push(...cutSheets(shapes, frame, draft, presses));
    sheet += Math.ceil(presses.length / draft.turns);
  }
  return { setups, cutPasses, totals: totalsOf(shapes, setups, cutPasses) };
}

/** Labels are cut sheet by sheet, and piece by piece where strips are cut first. */
function cutSheets(shapes: OrderShapes, frame: SheetFrame, draft: SetupDraft, presses: readonly Press[]): CutPass[] {
  const hulls = new Map<string, Ring>();
  const hullOf = (placementId: number, lineId: string, turn: number): Ring => {
    const key = `${placementId} ${turn} ${lineId}`;
    let hull = hulls.get(key);
    if (!hull) {
      const { x, y, rotationDeg } = draft.placements.find((placement) => placement.id === placementId)!;
      const label = placeShape(shapes, [shapes.line(lineId)], rotationDeg).labels[0];
      hulls.set(key, (hull = turnRing(translateRing(label, x, y), turn, draft.turns, frame)));
    }
    return hull;
  };
  const sheets = [...new Set(presses.map((press) => press.sheet))];
  const known = new Map<string, { strip: number; cuts: CutPass['cuts'] }[]>();
  return sheets.flatMap((sheet) => {
    const made = presses.filter((press) => press.sheet === sheet);
    // Most sheets of a run are alike: their passes are found once.
    const key = JSON.stringify(made.map((press) => press.inked));
    let passes = known.get(key);
    if (!passes) {
      const labels = made.flatMap((press) => press.inked.flatMap(({ placement, lineId }): LabelToCut[] => {
        const { dieId, cut = 'die' } = shapes.line(lineId);
        return cut === 'die' ? [{ dieId, lineId, placement, turn: press.turn, hull: hullOf(placement, lineId, press.turn), rimMm: shapes.rimMm(dieId) }] : [];
      }));
      const strip = (label: LabelToCut) => {
        const box = ringBox(label.hull);
        return stripOf({ ...box, x: box.x - frame.sheet.x, y: box.y - frame.sheet.y }, draft.stripCuts);
      };
      const strips = [...new Set(labels.map(strip))].sort((a, b) => a - b);
      const owned = (dieId: string) => shapes.order.dies.find((die) => die.id === dieId)!.owned;
      passes = strips.flatMap((at) => cutPassesOf(labels.filter((label) => strip(label) === at), owned).map((cuts) => ({ strip: at, cuts })));
      known.set(key, passes);
    }
    return passes.map(({ strip, cuts }) => ({ sheet, strip, cuts }));
  });
}

export function totalsOf(shapes: OrderShapes, setups: readonly Setup[], cutPasses: readonly CutPass[]): RunTotals {
  const { order } = shapes;
  const pace = order.pace ?? DEFAULT_PACE;
  const presses = setups.flatMap((setup) => setup.presses);
  const sheets = new Set(presses.map((press) => press.sheet)).size;
  const stamps = setups.reduce((n, setup) => n + setup.placements.reduce((m, placement) => m + placement.stamps.length, 0), 0);
  const inked = presses.flatMap((press) => press.inked.map(({ lineId }) => shapes.line(lineId)));
  const stampsInked = inked.reduce((n, line) => n + line.pieces.length, 0);
  const labelArea = inked.reduce((sum, line) => sum + shapes.dieAreaMm2(line.dieId), 0);
  const sheetArea = sheets * order.sheet.widthMm * order.sheet.heightMm;
  return {
    setups: setups.length, presses: presses.length, sheets, cutPasses: cutPasses.length,
    minutes: pace.setup * setups.length + pace.perStamp * stamps + pace.press * presses.length + pace.perInked * stampsInked + pace.cutPass * cutPasses.length,
    wastePercent: sheetArea > 0 ? 100 * (1 - labelArea / sheetArea) : 0,
  };
}
