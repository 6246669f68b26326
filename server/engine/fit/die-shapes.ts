/**
 * What each die shape is called, which parameters it has, and within which limits: one table from which forms are made and by
 * which every size is checked before it is drawn. Adding a shape: its kind in types.ts, its rings in shape-rings.ts, its row here.
 *
 * Limits depend on the other parameters (a corner radius is at most half of the shorter side), so they are functions of the
 * values given so far. All lengths mm.
 */
import { formatLength, type LengthUnit } from '../geometry/units.ts';
import { outlineFault } from './outline-check.ts';
import { HOLE_MARGIN_MM, scallopRadius } from './shape-rings.ts';
import type { DieGeometry, DieShape } from './types.ts';

type Sizes = Record<string, number>;

interface LengthParameter {
  kind: 'length';
  key: string;
  label: string;
  /** One line below the field, where the label is not enough. */
  hint?: string;
  /** May be left out; the shape then has a rule of its own (see types.ts). */
  optional?: true;
  /** What a form starts with, from the values so far. */
  default: (sizes: Sizes) => number;
  min: (sizes: Sizes) => number;
  max: (sizes: Sizes) => number;
  /** Says where the upper limit comes from: "half of the shorter side". */
  maxBecause?: string;
}
interface ChoiceParameter {
  kind: 'choice';
  key: string;
  label: string;
  choices: readonly { value: string; label: string }[];
}
export type DieParameter = LengthParameter | ChoiceParameter;

export interface DieShapeEntry {
  /** Unique in the table; a square and a circle are forms of their own but no kinds. */
  form: string;
  kind: Exclude<DieShape['kind'], 'outline'>;
  label: string;
  /** Height equals width: one field for both. */
  equalSides?: true;
  parameters: readonly DieParameter[];
}

/** Contract's and person's limit: nothing on a craft table is longer, nothing smaller can be stamped in. */
const LARGEST_MM = 1000;
const SMALLEST_MM = 1;

const shorter = (s: Sizes): number => Math.min(s.widthMm, s.heightMm);
const longer = (s: Sizes): number => Math.max(s.widthMm, s.heightMm);
const rounded = (mm: number): number => Math.round(mm * 10) / 10;

function size(key: 'widthMm' | 'heightMm', label: string, start: number): LengthParameter {
  return { kind: 'length', key, label, default: () => start, min: () => SMALLEST_MM, max: () => LARGEST_MM };
}
function length(key: string, label: string, rest: Omit<LengthParameter, 'kind' | 'key' | 'label'>): LengthParameter {
  return { kind: 'length', key, label, ...rest };
}
const WIDTH = size('widthMm', 'Width', 70);
const HEIGHT = size('heightMm', 'Height', 40);
const BOX = [WIDTH, HEIGHT];
const SIDE = [size('widthMm', 'Side', 50)];
const DIAMETER = [size('widthMm', 'Diameter', 50)];

const CORNER_RADIUS = length('cornerRadiusMm', 'Corner radius', { optional: true, default: () => 0, min: () => 0, max: (s) => shorter(s) / 2, maxBecause: 'half of the shorter side' });
const SCALLOPS = [
  length('scallopMm', 'Width of one scallop', { default: (s) => rounded(Math.max(1, shorter(s) / 8)), min: () => 1, max: (s) => shorter(s) / 2, maxBecause: 'half of the shorter side', hint: 'Given way to a whole number of scallops' }),
  length('depthMm', 'Depth of one scallop', { default: (s) => rounded(s.scallopMm * 0.35), min: (s) => s.scallopMm / 20, max: (s) => s.scallopMm / 2, maxBecause: 'half of its width' }),
];
const NOTCH_RADIUS = length('notchRadiusMm', 'Radius of the notch', { default: (s) => rounded(shorter(s) / 8), min: () => 0.5, max: (s) => shorter(s) * 0.45, maxBecause: 'a little less than half of the shorter side' });

export const DIE_SHAPES: readonly DieShapeEntry[] = [
  { form: 'rectangle', kind: 'rectangle', label: 'Rectangle', parameters: [...BOX, CORNER_RADIUS] },
  { form: 'square', kind: 'rectangle', label: 'Square', equalSides: true, parameters: [...SIDE, CORNER_RADIUS] },
  { form: 'oval', kind: 'oval', label: 'Oval', parameters: BOX },
  { form: 'circle', kind: 'oval', label: 'Circle', equalSides: true, parameters: DIAMETER },
  { form: 'stadium', kind: 'stadium', label: 'Stadium', parameters: BOX },
  { form: 'scalloped', kind: 'scalloped', label: 'Scalloped', parameters: [
    { kind: 'choice', key: 'base', label: 'Along', choices: [{ value: 'oval', label: 'an oval' }, { value: 'rectangle', label: 'a rectangle' }] }, ...BOX, ...SCALLOPS] },
  { form: 'scalloped-circle', kind: 'scalloped', label: 'Scalloped circle', equalSides: true, parameters: [
    { kind: 'choice', key: 'base', label: 'Along', choices: [{ value: 'oval', label: 'a circle' }] }, ...DIAMETER, ...SCALLOPS] },
  { form: 'bracket', kind: 'bracket', label: 'Bracket label', parameters: [
    { kind: 'choice', key: 'corners', label: 'Corners', choices: [{ value: 'convex', label: 'rounded outwards' }, { value: 'concave', label: 'rounded inwards' }] }, ...BOX,
    length('stepMm', 'Step before the corner', { default: (s) => rounded(shorter(s) / 20), min: () => 0, max: (s) => shorter(s) * 0.2, maxBecause: 'a fifth of the shorter side' }),
    length('radiusMm', 'Radius of the corner', { default: (s) => rounded(shorter(s) / 8), min: () => 0.5, max: (s) => shorter(s) / 2 - (s.stepMm ?? 0), maxBecause: 'half of the shorter side, less the step' }),
  ] },
  { form: 'notched', kind: 'notched', label: 'Notched ticket', parameters: [
    { kind: 'choice', key: 'at', label: 'Notches', choices: [{ value: 'corners', label: 'at the corners' }, { value: 'ends', label: 'in the two ends' }] }, ...BOX, NOTCH_RADIUS] },
  { form: 'tag', kind: 'tag', label: 'Tag', parameters: [
    ...BOX,
    length('shoulderMm', 'Cut off at the corners', { default: (s) => rounded(shorter(s) / 4), min: () => 0.5, max: (s) => shorter(s) / 2, maxBecause: 'half of the shorter side' }),
    length('holeMm', 'Hole', { default: () => 4, min: () => 0, max: (s) => Math.min(shorter(s) * 0.4, longer(s) - 2 * HOLE_MARGIN_MM), maxBecause: 'two fifths of the shorter side', hint: 'Diameter; 0 for none' }),
  ] },
  { form: 'banner', kind: 'banner', label: 'Banner', parameters: [
    { kind: 'choice', key: 'ends', label: 'Forked', choices: [{ value: 'one', label: 'at one end' }, { value: 'two', label: 'at both ends' }] }, ...BOX,
    length('forkMm', 'Depth of the fork', { default: (s) => rounded(shorter(s) / 3), min: () => 0.5, max: (s) => longer(s) * 0.45, maxBecause: 'a little less than half of the longer side' }),
  ] },
  { form: 'hexagon', kind: 'hexagon', label: 'Hexagon', parameters: [
    ...BOX, length('pointMm', 'Length of a point', { optional: true, default: (s) => rounded(s.widthMm / 4), min: () => 0.5, max: (s) => s.widthMm / 2, maxBecause: 'half of the width' })] },
  { form: 'arch', kind: 'arch', label: 'Arch', parameters: [
    ...BOX, length('riseMm', 'Height of the round part', { optional: true, default: (s) => rounded(Math.min(s.widthMm / 2, s.heightMm)), min: () => 0.5, max: (s) => s.heightMm, maxBecause: 'the height' })] },
];

export interface DieFault { path: string; message: string }

/** Rounding of inches to mm and back may pass a limit by this much. */
const LIMIT_SLACK_MM = 1e-6;

/** What is wrong with a shape, field by field; none means that it can be drawn. Takes anything, also what came over the wire. */
export function checkDieShape(shape: unknown, unit: LengthUnit = 'mm'): DieFault[] {
  if (typeof shape !== 'object' || shape === null) return [{ path: 'kind', message: 'Choose a shape.' }];
  const given = shape as Record<string, unknown>;
  if (given.kind === 'outline') {
    const fault = outlineFault(given.outline);
    return fault === null ? [] : [{ path: 'outline', message: fault }];
  }
  const row = DIE_SHAPES.find((entry) => entry.kind === given.kind && !entry.equalSides);
  if (!row) return [{ path: 'kind', message: `“${String(given.kind)}” is not a shape known here.` }];

  const faults: DieFault[] = [];
  const sizes: Sizes = {};
  for (const parameter of row.parameters) {
    const value = given[parameter.key];
    const message = parameter.kind === 'choice' ? choiceFault(parameter, value) : lengthFault(parameter, value, sizes, unit);
    if (message !== null) faults.push({ path: parameter.key, message });
    if (typeof value === 'number') sizes[parameter.key] = value;
  }
  if (faults.length === 0 && row.kind === 'scalloped' && 2 * scallopRadius(sizes.scallopMm, sizes.depthMm) > 0.9 * shorter(sizes)) {
    faults.push({ path: 'depthMm', message: 'Scallops so wide and flat do not close round this size: make them deeper or narrower.' });
  }
  return faults;
}

function choiceFault(parameter: ChoiceParameter, value: unknown): string | null {
  return parameter.choices.some((c) => c.value === value) ? null : `${parameter.label}: choose ${parameter.choices.map((c) => c.label).join(' or ')}.`;
}

function lengthFault(parameter: LengthParameter, value: unknown, sizes: Sizes, unit: LengthUnit): string | null {
  if (value === undefined && parameter.optional) return null;
  if (typeof value !== 'number' || !Number.isFinite(value)) return `${parameter.label}: a length is needed.`;
  const min = parameter.min(sizes), max = parameter.max(sizes);
  // A limit that hangs on a size which is itself missing says nothing.
  if (value < min - LIMIT_SLACK_MM) return `${parameter.label}: at least ${formatLength(min, unit)}.`;
  if (value > max + LIMIT_SLACK_MM) return `${parameter.label}: at most ${formatLength(max, unit)}${parameter.maxBecause ? `, ${parameter.maxBecause}` : ''}.`;
  return null;
}

/** Shape, stitch line and rim. Paths lead into a DieGeometry. */
export function checkDie(die: unknown, unit: LengthUnit = 'mm'): DieFault[] {
  if (typeof die !== 'object' || die === null) return [{ path: 'shape', message: 'Choose a shape.' }];
  const { shape, stitchInsetMm, rimMm } = die as Partial<Record<keyof DieGeometry, unknown>>;
  const faults = checkDieShape(shape, unit).map((fault) => ({ path: `shape.${fault.path}`, message: fault.message }));
  for (const [path, label, value] of [['stitchInsetMm', 'Stitch line', stitchInsetMm], ['rimMm', 'Rim', rimMm]] as const) {
    if (value === undefined) continue;
    if (typeof value !== 'number' || !(value >= 0 && value <= LARGEST_MM)) faults.push({ path, message: `${label}: a length of 0 or more is needed.` });
  }
  return faults;
}

/** The first fault in words, or null. */
export function dieProblem(die: unknown, unit: LengthUnit = 'mm'): string | null {
  return checkDie(die, unit)[0]?.message ?? null;
}

/** A new shape of a form, filled with what its fields start with. Choices take their first. */
export function startingShape(form: string): DieShape {
  const row = DIE_SHAPES.find((entry) => entry.form === form);
  if (!row) throw new RangeError(`There is no form of die called “${form}”.`);
  const sizes: Sizes = {};
  const shape: Record<string, unknown> = { kind: row.kind };
  for (const parameter of row.parameters) {
    if (parameter.kind === 'choice') shape[parameter.key] = parameter.choices[0].value;
    else if (!parameter.optional) shape[parameter.key] = sizes[parameter.key] = parameter.default(sizes);
    if (parameter.key === 'widthMm' && row.equalSides) shape.heightMm = sizes.heightMm = sizes.widthMm;
  }
  return shape as unknown as DieShape;
}
