/** Figures of a plan over all its runs, each of which has sheets of its own. */
import type { RunPlan, RunTotals } from '../../engine/gangrun/types.ts';

type Figures = RunPlan['atLeast'];

export function sumFigures(figures: readonly Figures[]): Figures {
  const sum = (key: keyof Figures) => figures.reduce((total, one) => total + one[key], 0);
  return { setups: sum('setups'), presses: sum('presses'), sheets: sum('sheets'), cutPasses: sum('cutPasses'), minutes: sum('minutes') };
}

/** Waste counts sheet by sheet: all run sheets of a batch have one size. */
export function sumTotals(totals: readonly RunTotals[]): RunTotals {
  const figures = sumFigures(totals);
  const wasted = totals.reduce((area, one) => area + one.sheets * one.wastePercent, 0);
  return { ...figures, wastePercent: figures.sheets === 0 ? 0 : wasted / figures.sheets };
}

/** Of a run without a line that could be planned. */
export function emptyPlan(): RunPlan {
  const none = { setups: 0, presses: 0, sheets: 0, cutPasses: 0, minutes: 0 };
  return { setups: [], cutPasses: [], totals: { ...none, wastePercent: 0 }, atLeast: none, unplaced: [], stopped: false };
}

export function labelsMade(plan: RunPlan): number {
  return plan.setups.reduce((sum, setup) => sum + setup.presses.reduce((labels, press) => labels + press.inked.length, 0), 0);
}
