/**
 * Words for a border, and which die of several to recommend. Limits are the studio's own; the usual ones stand here.
 */
import type { Fit, FitOptions } from './types.ts';

/** Common practice, no source: a border that looks meant, and one that still looks even. */
export const DEFAULT_GOOD_MM = 3;
export const DEFAULT_SNUG_MM = 1.5;
/** A border of exactly a limit has reached it, whatever rounding did on the way. */
const LIMIT_SLACK_MM = 1e-6;

export function fitsWith(borderMm: number): boolean {
  return borderMm >= -LIMIT_SLACK_MM;
}

export function verdictOf(borderMm: number, options: Pick<FitOptions, 'goodMm' | 'snugMm'> = {}): Exclude<Fit['verdict'], 'roomy'> {
  const reaches = (limit: number): boolean => borderMm >= limit - LIMIT_SLACK_MM;
  if (!fitsWith(borderMm)) return 'no';
  if (reaches(options.goodMm ?? DEFAULT_GOOD_MM)) return 'good';
  return reaches(options.snugMm ?? DEFAULT_SNUG_MM) ? 'snug' : 'tight';
}

/** A row of a fit table, with 'roomy' where a smaller die is good as well. */
export function withRoomy(row: Fit[], areasMm2: readonly number[]): Fit[] {
  const good = row.flatMap((fit, i) => (fit.verdict === 'good' ? [areasMm2[i]] : []));
  const smallest = Math.min(...good);
  // Dies of one size but different shape are not smaller than each other.
  return row.map((fit, i) => (fit.verdict === 'good' && areasMm2[i] > smallest * (1 + 1e-9) ? { ...fit, verdict: 'roomy' } : fit));
}

/** Index of the die to recommend: the smallest by area whose verdict is good, else the best border that fits; null where none fits. */
export function recommendedDie(row: readonly Fit[], areasMm2: readonly number[]): number | null {
  let best: number | null = null;
  const isGood = (fit: Fit): boolean => fit.verdict === 'good' || fit.verdict === 'roomy';
  row.forEach((fit, i) => {
    if (!fit.fits || fit.verdict === 'no') return;
    if (best === null) { best = i; return; }
    const holder = row[best];
    if (isGood(fit) !== isGood(holder)) { if (isGood(fit)) best = i; return; }
    if (isGood(fit) ? areasMm2[i] < areasMm2[best] : fit.borderMm > holder.borderMm) best = i;
  });
  return best;
}
