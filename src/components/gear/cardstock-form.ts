import type { Unit } from '../../api/account.ts';
import type { Cardstock, Grain } from '../../api/gear.ts';
import type { GearForm } from './gear-form.ts';
import { named, needed } from './gear-form.ts';

export interface CardstockValues { name: string; note: string; widthMm: number | null; heightMm: number | null; colour: string; onHand: number | null; grain: Grain; weightGsm: number | null }

export const GRAINS: readonly { value: Grain; label: string }[] = [{ value: 'unknown', label: 'Not known' }, { value: 'along-width', label: 'Across' }, { value: 'along-height', label: 'Up and down' }];

/** Half of the usual sheet of paper: A5, or half a letter sheet. */
const USUAL: Record<Unit, { widthMm: number; heightMm: number }> = { mm: { widthMm: 148, heightMm: 210 }, in: { widthMm: 139.7, heightMm: 215.9 } };

export const cardstockForm: GearForm<Cardstock, CardstockValues> = {
  blank: (unit) => ({ name: '', note: '', ...USUAL[unit], colour: '#FFFFFF', onHand: 0, grain: 'unknown', weightGsm: null }),
  fromItem: ({ name, note, widthMm, heightMm, colour, onHand, grain, weightGsm }) => ({ name, note, widthMm, heightMm, colour, onHand, grain, weightGsm }),
  check: (v) => ({ ...named(v), ...needed({ ...v }, ['widthMm', 'heightMm'], 'A length is needed.'), ...needed({ ...v }, ['onHand'], 'A number is needed; 0 for none.') }),
  toBody: (v) => ({ ...v }),
  words: (v, length) => [
    ['Name', v.name],
    ['Sheet', v.widthMm === null || v.heightMm === null ? 'not complete' : length.showSize(v.widthMm, v.heightMm)],
    ['Colour', v.colour],
    ['On hand', String(v.onHand ?? '')],
    ['Grain', GRAINS.find((g) => g.value === v.grain)?.label ?? ''],
    ['Weight', v.weightGsm === null ? '' : `${v.weightGsm} g/m²`],
    ['Note', v.note],
  ],
};

export const drawableCardstock = (v: CardstockValues) => ({ ...v, widthMm: v.widthMm ?? 148, heightMm: v.heightMm ?? 210, onHand: v.onHand ?? 0 });
