/** Door of the cut plan: parts and stock → guillotine cuts in steps. */
export { planCuts } from './plan-cuts.ts';
export type { CutPart, CutPlan, CutStep } from './types.ts';
