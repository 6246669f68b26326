/** What a form for dies holds, and how it becomes geometry and comes from it. Pure; shapes and limits are those of the kernel's table. */
import { checkDie, DIE_SHAPES, startingShape } from '../../../server/engine/fit/die-shapes.ts';
import type { DieShapeEntry } from '../../../server/engine/fit/die-shapes.ts';
import { nestedSizes } from '../../../server/engine/fit/die-sizes.ts';
import type { DieGeometry, DieShape } from '../../../server/engine/fit/types.ts';
import { MM_PER_INCH } from '../../../server/engine/geometry/units.ts';
import type { LengthUnit } from '../../../server/engine/geometry/units.ts';
import type { Die, NewDie } from '../../api/dies.ts';

export const OWN_FORM = 'outline';
type Parameter = number | string | null;

export interface DieFormValues {
  form: string;
  /** Lengths (null while unreadable or left out) and choices, by the keys of the shape's parameters. */
  parameters: Record<string, Parameter>;
  /** A traced or imported outline is kept as it is. */
  own: DieShape | null;
  name: string;
  stitchInsetMm: number | null;
  rimMm: number | null;
  owned: number | null;
  /** New dies only: how many sizes, and by how much each is smaller. */
  sizes: number | null;
  stepMm: number | null;
}

export const formEntry = (form: string): DieShapeEntry | null => DIE_SHAPES.find((entry) => entry.form === form) ?? null;

function parametersOf(shape: DieShape): Record<string, Parameter> {
  const { kind: _, ...rest } = shape as unknown as Record<string, Parameter>;
  return rest;
}

/** Where a form starts: round figures in the person's unit. */
const START_MM = { mm: { widthMm: 70, heightMm: 40, stepMm: 10 }, in: { widthMm: 2.75 * MM_PER_INCH, heightMm: 1.5 * MM_PER_INCH, stepMm: 0.375 * MM_PER_INCH } };

export function blankDie(unit: LengthUnit): DieFormValues {
  const { stepMm, ...size } = START_MM[unit];
  return { form: 'rectangle', parameters: { ...parametersOf(startingShape('rectangle')), ...size }, own: null, name: '', stitchInsetMm: null, rimMm: null, owned: 1, sizes: 1, stepMm };
}

/** Another shape keeps the size that was typed. */
export function withForm(values: DieFormValues, form: string): DieFormValues {
  const start = parametersOf(startingShape(form));
  const kept = ['widthMm', 'heightMm'].flatMap((key) => (typeof values.parameters[key] === 'number' ? [[key, values.parameters[key]]] : []));
  const parameters = { ...start, ...Object.fromEntries(kept) };
  if (formEntry(form)?.equalSides) parameters.heightMm = parameters.widthMm;
  return { ...values, form, parameters };
}

export function fromDie({ geometry, name, owned }: Die): DieFormValues {
  const { shape } = geometry;
  const base = { ...blankDie('mm'), name, owned, stitchInsetMm: geometry.stitchInsetMm ?? null, rimMm: geometry.rimMm ?? null, sizes: 1 };
  if (shape.kind === 'outline') return { ...base, form: OWN_FORM, parameters: {}, own: shape };
  const equal = shape.widthMm === shape.heightMm;
  const entry = DIE_SHAPES.find((row) => row.kind === shape.kind && (row.equalSides ?? false) === equal) ?? DIE_SHAPES.find((row) => row.kind === shape.kind)!;
  return { ...base, form: entry.form, parameters: parametersOf(shape) };
}

/** As far as it is typed; `dieErrors` says what is wrong with it. */
export function toGeometry({ form, parameters, own, stitchInsetMm, rimMm }: DieFormValues): DieGeometry {
  const entry = formEntry(form);
  const given = Object.fromEntries(Object.entries(parameters).filter(([, value]) => value !== null));
  const shape = (own ?? { kind: entry?.kind, ...given, ...(entry?.equalSides ? { heightMm: parameters.widthMm ?? undefined } : {}) }) as DieShape;
  return { shape, ...(stitchInsetMm ? { stitchInsetMm } : {}), ...(rimMm ? { rimMm } : {}) };
}

/** Words beside fields, by the field's key. */
export function dieErrors(values: DieFormValues, unit: LengthUnit): Record<string, string> {
  const faults = checkDie(toGeometry(values), unit).map(({ path, message }) => [path.replace(/^shape\./, ''), message]);
  const errors: Record<string, string> = Object.fromEntries(faults);
  if (values.owned === null) errors.owned = 'How many are owned? 0 for one that is only wished for.';
  if (values.sizes === null) errors.sizes = 'How many sizes are in the set?';
  else if (values.sizes > 1 && !(values.stepMm !== null && values.stepMm > 0)) errors.stepMm = 'By how much is each size smaller than the one around it?';
  else if (Object.keys(errors).length === 0 && values.sizes > 1) {
    const possible = nestedSizes(toGeometry(values).shape, values.stepMm!, values.sizes).length;
    if (possible < values.sizes) errors.stepMm = `Only ${possible} of these ${values.sizes} sizes can be made: take a smaller step or fewer sizes.`;
  }
  return errors;
}

/** The die, and those nested in it. */
export function newDies(values: DieFormValues): NewDie[] {
  const geometry = toGeometry(values);
  const owned = values.owned ?? 1;
  if ((values.sizes ?? 1) <= 1 || !values.stepMm) return [{ name: values.name, geometry, owned }];
  return nestedSizes(geometry.shape, values.stepMm, values.sizes!).map((shape, i) => ({ name: values.name && `${values.name} ${i + 1}`, geometry: { ...geometry, shape }, owned }));
}
