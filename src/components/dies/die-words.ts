/** Dies in words. Pure. */
import { DIE_SHAPES } from '../../../server/engine/fit/die-shapes.ts';
import { dieOutline } from '../../../server/engine/fit/die-outline.ts';
import { checkDie } from '../../../server/engine/fit/die-shapes.ts';
import type { DieGeometry } from '../../../server/engine/fit/types.ts';
import { outlineBox } from '../../../server/engine/geometry/ring.ts';

interface Sizes { showSize(widthMm: number, heightMm: number): string; show(mm: number): string }

export function dieSize({ geometry }: { geometry: DieGeometry }, length: Sizes): string {
  if (checkDie(geometry).length > 0) return '—';
  const { w, h } = outlineBox(dieOutline(geometry));
  return length.showSize(w, h);
}

export function shapeName({ shape }: DieGeometry): string {
  if (shape.kind === 'outline') return 'Own outline';
  const equal = shape.widthMm === shape.heightMm;
  return (DIE_SHAPES.find((row) => row.kind === shape.kind && (row.equalSides ?? false) === equal) ?? DIE_SHAPES.find((row) => row.kind === shape.kind))?.label ?? shape.kind;
}

/** What it is called: by its own name, else by its size. */
export const dieName = (die: { name: string; geometry: DieGeometry }, length: Sizes): string => die.name || dieSize(die, length);

export function dieFacts({ geometry }: { geometry: DieGeometry }, length: Sizes): string {
  const facts = [shapeName(geometry)];
  if (geometry.stitchInsetMm) facts.push(`stitch line ${length.show(geometry.stitchInsetMm)} inside`);
  if (geometry.rimMm) facts.push(`rim ${length.show(geometry.rimMm)}`);
  return facts.join(', ');
}
