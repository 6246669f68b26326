/**
 * The steps of a batch, in the order of the work, each an address. A step whose page is not there is not shown. A new one is a line
 * here and a route.
 */
import type { Batch } from '../../api/batches.ts';
import { count, labelsOf } from './batch-words.ts';

export interface BatchStep {
  /** Name of its route, below `/batches/:batchId`. */
  route: string;
  label: string;
  done: (batch: Batch) => boolean;
  /** One line of what is settled; null while nothing is. */
  settled: (batch: Batch) => string | null;
}

const past = (batch: Batch, ...states: Batch['state'][]) => states.includes(batch.state);
const placed = (batch: Batch) => batch.lineItems.filter((line) => line.cut !== 'die' || line.place !== null);
const dies = (batch: Batch) => new Set(batch.lineItems.map((line) => (line.cut === 'die' ? line.dieId : null)).filter((id) => id !== null)).size;

export const BATCH_STEPS: readonly BatchStep[] = [
  {
    route: 'batch-choose', label: 'Choose', done: (batch) => batch.lineItems.length > 0 && labelsOf(batch) > 0,
    settled: (batch) => (batch.lineItems.length === 0 ? count(batch.cards, 'card') : `${count(batch.lineItems.length, 'stamp')}, ${count(labelsOf(batch), 'label')}`),
  },
  {
    route: 'batch-fit', label: 'Fit', done: (batch) => batch.lineItems.length > 0 && placed(batch).length === batch.lineItems.length,
    settled: (batch) => (batch.lineItems.length === 0 ? null : placed(batch).length < batch.lineItems.length ? `${count(batch.lineItems.length - placed(batch).length, 'label')} without a die` : count(dies(batch), 'die')),
  },
  {
    route: 'batch-lay-out', label: 'Lay out', done: (batch) => batch.plan !== null && !batch.plan.outdated,
    settled: (batch) => (batch.plan === null ? null : batch.plan.outdated ? `Plan ${batch.plan.number} is out of date` : `Plan ${batch.plan.number}, ${count(batch.sheets ?? 0, 'sheet')}`),
  },
  { route: 'batch-print', label: 'Print', done: (batch) => past(batch, 'printed', 'stamping', 'finished'), settled: (batch) => (past(batch, 'printed', 'stamping', 'finished') ? 'Printed' : null) },
  { route: 'batch-bench', label: 'Bench', done: (batch) => past(batch, 'finished'), settled: (batch) => (past(batch, 'stamping') ? 'Being stamped' : past(batch, 'finished') ? 'Stamped' : null) },
  { route: 'batch-finish', label: 'Finish', done: (batch) => past(batch, 'finished'), settled: (batch) => (past(batch, 'finished') ? 'Finished' : null) },
];
