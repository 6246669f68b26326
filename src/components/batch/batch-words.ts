/** What counts and states of a batch are called. Pure. */
import type { Batch, BatchState } from '../../api/batches.ts';

export const STATE_WORDS: Record<BatchState, string> = { chosen: 'Chosen', planned: 'Planned', printed: 'Printed', stamping: 'Being stamped', finished: 'Finished' };

export const count = (n: number, one: string, many = `${one}s`): string => `${n.toLocaleString()} ${n === 1 ? one : many}`;

export const wanted = (batch: Batch): number => batch.lineItems.reduce((sum, line) => sum + line.quantity, 0);
export const labelsOf = (batch: Batch): number => batch.lineItems.reduce((sum, line) => sum + line.quantity + line.overs, 0);

/** Labels against cards, as one line; null where they agree. */
export function cardsLeft(batch: Batch): string | null {
  const difference = batch.cards - wanted(batch);
  if (difference === 0 || batch.lineItems.length === 0) return null;
  return difference > 0 ? `${count(difference, 'card has', 'cards have')} no label yet.` : `${count(-difference, 'label')} more than cards.`;
}
