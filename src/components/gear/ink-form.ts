import type { Ink, InkKind } from '../../api/gear.ts';
import type { GearForm } from './gear-form.ts';
import { named, needed } from './gear-form.ts';

export interface InkValues { name: string; note: string; kind: InkKind; colour: string; dryingMinutes: number | null; clearMm: number | null }

/** What is true of a kind in general; the maker's own instructions come first. */
export const INK_KINDS: readonly { value: InkKind; label: string; about: string }[] = [
  { value: 'dye', label: 'Dye', about: 'Sinks in and dries quickly.' },
  { value: 'pigment', label: 'Pigment', about: 'Stays on top and dries slowly; takes embossing powder.' },
  { value: 'hybrid', label: 'Hybrid', about: 'Between dye and pigment.' },
  { value: 'solvent', label: 'Solvent', about: 'For coated and other dense surfaces. Ventilate, keep heat tools away, follow the maker’s label.' },
];
/** Common practice, no source: until a second press beside the first does not smear it. */
export const USUAL_MINUTES: Record<InkKind, number> = { dye: 2, pigment: 20, hybrid: 5, solvent: 5 };

export const inkForm: GearForm<Ink, InkValues> = {
  blank: () => ({ name: '', note: '', kind: 'dye', colour: '#22304A', dryingMinutes: USUAL_MINUTES.dye, clearMm: 20 }),
  fromItem: ({ name, note, kind, colour, dryingMinutes, clearMm }) => ({ name, note, kind, colour, dryingMinutes, clearMm }),
  check: (v) => ({ ...named(v), ...needed({ ...v }, ['dryingMinutes'], 'A number is needed; 0 for none.'), ...needed({ ...v }, ['clearMm'], 'A length is needed; 0 for none.') }),
  toBody: (v) => ({ ...v }),
  words: (v, length) => [
    ['Name', v.name],
    ['Kind', INK_KINDS.find((k) => k.value === v.kind)?.label ?? ''],
    ['Colour', v.colour],
    ['Drying', `${v.dryingMinutes ?? ''} min`],
    ['Pad clearance', v.clearMm === null ? 'not complete' : length.show(v.clearMm)],
    ['Note', v.note],
  ],
};

const HEX = /^#[\da-f]{6}$/i;
export const drawableInk = (v: InkValues) => ({ colour: HEX.test(v.colour) ? v.colour : '#888888', clearMm: v.clearMm ?? 0 });
