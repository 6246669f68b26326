/** What a kind of gear gives to its page: pure functions between the row and the values of its form. */
import type { Unit } from '../../api/account.ts';
import type { useLength } from '../../composables/useLength.ts';

export type LengthWords = Pick<ReturnType<typeof useLength>, 'show' | 'showSize'>;

export interface GearForm<Item, Values> {
  /** Values of a new one; sheets and papers begin with the sizes usual where the unit is. */
  blank(unit: Unit): Values;
  fromItem(item: Item): Values;
  /** Path → words for what cannot be sent. */
  check(values: Values): Record<string, string>;
  toBody(values: Values): object;
  /** Every field as label and words, to show two versions side by side. */
  words(values: Values, length: LengthWords): [label: string, words: string][];
}

export const needed = (values: Record<string, unknown>, paths: readonly string[], words: string): Record<string, string> =>
  Object.fromEntries(paths.filter((path) => values[path] === null || values[path] === '').map((path) => [path, words]));

export const named = (values: { name: string }): Record<string, string> => (values.name.trim() === '' ? { name: 'Give it a name.' } : {});
