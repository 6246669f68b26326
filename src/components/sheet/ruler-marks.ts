/** Marks of a ruler along an edge of a drawing, in the person's unit. Pure; lengths mm. */
import type { LengthUnit } from '../../../server/engine/geometry/units.ts';
import { MM_PER_INCH } from '../../../server/engine/geometry/units.ts';

export interface RulerMarks {
  /** Path of all marks: from the edge outwards, along x; `length` of the longest is 1. */
  marks: { at: number; length: number }[];
  figures: { at: number; text: string }[];
}

/** Millimetres: long at 10, middle at 5; figures each 20. Inches: eighths, with the half and the whole longer. */
export function rulerMarks(lengthMm: number, unit: LengthUnit): RulerMarks {
  const stepMm = unit === 'mm' ? 5 : MM_PER_INCH / 8;
  const count = Math.floor(lengthMm / stepMm + 1e-6);
  const marks = Array.from({ length: count + 1 }, (_, i) => ({ at: i * stepMm, length: markLength(i, unit) }));
  const everyMm = unit === 'mm' ? 20 : MM_PER_INCH;
  const figures = Array.from({ length: Math.floor(lengthMm / everyMm + 1e-6) }, (_, i) => ({ at: (i + 1) * everyMm, text: String(unit === 'mm' ? (i + 1) * 20 : i + 1) }));
  return { marks, figures };
}

function markLength(i: number, unit: LengthUnit): number {
  if (unit === 'mm') return i % 2 === 0 ? 1 : 0.55;
  return i % 8 === 0 ? 1 : i % 4 === 0 ? 0.7 : 0.45;
}
