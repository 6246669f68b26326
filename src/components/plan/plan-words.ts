/** Figures of a plan with what is proven about them, in words. Pure. */
import type { AlternativeKind, Plan, PlanSummary } from '../../api/batches.ts';
import { count } from '../batch/batch-words.ts';

export interface Figure { key: string; value: string; name: string; proof: string; best: boolean }

/** Minutes nobody can tell apart. */
const SAME_MINUTES = 0.5;

export function planFigures({ totals, atLeast }: Pick<Plan, 'totals' | 'atLeast'>): Figure[] {
  const counted = ([['setups', 'setup'], ['presses', 'press', 'presses'], ['sheets', 'sheet'], ['cutPasses', 'cut pass', 'cut passes']] as const).map(([key, one, many]): Figure => {
    const best = totals[key] <= atLeast[key];
    return { key, value: totals[key].toLocaleString(), name: totals[key] === 1 ? one : many ?? `${one}s`, best, proof: best ? 'Fewer is impossible.' : `At least ${atLeast[key].toLocaleString()}.` };
  });
  const quick = totals.minutes <= atLeast.minutes + SAME_MINUTES;
  return [...counted, {
    key: 'minutes', value: String(Math.round(totals.minutes)), name: Math.round(totals.minutes) === 1 ? 'minute' : 'minutes', best: quick,
    proof: quick ? 'Faster is impossible at this pace.' : `At least ${Math.floor(atLeast.minutes)}.`,
  }];
}

/** What the page may claim of the whole plan. */
export function verdictOnPlan(plan: Pick<Plan, 'totals' | 'atLeast' | 'stopped'>): string | null {
  if (planFigures(plan).every(({ best }) => best)) return 'This is the best plan there is: every figure is as low as can be.';
  return plan.stopped ? 'Stopped early: there may be a better plan.' : null;
}

export const ALTERNATIVE_WORDS: Record<AlternativeKind, string> = { time: 'Least time', sheets: 'Fewest sheets', 'cut-passes': 'Fewest cut passes' };
export const MADE_WORDS: Record<PlanSummary['madeHow'], string> = { planned: 'Planned', 'around-pins': 'Planned round pins', 'by-hand': 'Laid out by hand', alternative: 'Chosen among alternatives' };

export const shortTotals = ({ sheets, presses, minutes }: Plan['totals']): string => `${count(sheets, 'sheet')}, ${count(presses, 'press', 'presses')}, ${Math.round(minutes)} min`;
