/** Doors of the gang run: labels wanted → setups, presses, sheets, cut passes; faults of a layout made by hand. */
export { planGangRun } from './plan.ts';
export { checkLayout } from './layout.ts';
export type { CutPass, LayoutFault, Pace, Placement, Platform, Press, RunLine, RunOrder, RunPlan, RunTotals, Setup } from './types.ts';
