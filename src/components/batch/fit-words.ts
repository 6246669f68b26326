/** Verdicts in words, and which mark goes with them. Pure. */
import type { Place } from '../../api/batches.ts';

type Verdict = Place['verdict'];
export const VERDICT_WORDS: Record<Verdict, string> = { roomy: 'Roomy', good: 'Good', snug: 'Snug', tight: 'Tight', no: 'Does not fit' };
export const VERDICT_MARKS: Record<Verdict, 'good' | 'snug' | 'bad' | 'waiting'> = { roomy: 'good', good: 'good', snug: 'snug', tight: 'snug', no: 'bad' };
