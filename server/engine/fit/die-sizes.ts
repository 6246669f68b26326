/**
 * Sizes of dies: nested sets from the largest and a step, the size that an artwork needs, the card front that a label needs.
 * Lengths mm. Nothing is mutated; results can always be drawn (die-shapes.ts).
 */
import { outlineBox } from '../geometry/ring.ts';
import { mapOutline } from '../geometry/transform.ts';
import type { Outline } from '../geometry/types.ts';
import { bestFit } from './best-fit.ts';
import { checkDieShape, DIE_SHAPES } from './die-shapes.ts';
import { dieOutline } from './die-outline.ts';
import { offsetDie } from './offset-die.ts';
import type { DieGeometry, DieShape, FitOptions } from './types.ts';

/**
 * A shape in another size: corners, notches and scallops keep their measure as long as their limits let them. An own outline is stretched.
 * Null where even at its limits the shape cannot be that small.
 */
export function resizedShape(shape: DieShape, widthMm: number, heightMm: number): DieShape | null {
  if (!(widthMm > 0 && heightMm > 0)) return null;
  if (shape.kind === 'outline') {
    const box = outlineBox(shape.outline);
    const outline = mapOutline(shape.outline, (p) => ({ x: ((p.x - box.x) * widthMm) / box.w, y: ((p.y - box.y) * heightMm) / box.h }));
    return { kind: 'outline', outline };
  }
  const row = DIE_SHAPES.find((entry) => entry.kind === shape.kind && !entry.equalSides);
  const sizes: Record<string, number> = { widthMm, heightMm };
  const resized: Record<string, unknown> = { ...shape, widthMm, heightMm };
  for (const parameter of row?.parameters ?? []) {
    const value = resized[parameter.key];
    if (parameter.kind !== 'length' || typeof value !== 'number' || parameter.key in sizes) continue;
    resized[parameter.key] = sizes[parameter.key] = Math.max(parameter.min(sizes), Math.min(parameter.max(sizes), value));
  }
  return checkDieShape(resized).length === 0 ? (resized as unknown as DieShape) : null;
}

/** From the largest down, each smaller by stepMm in width and in height; ends early where the shape cannot be smaller. */
export function nestedSizes(largest: DieShape, stepMm: number, count: number): DieShape[] {
  if (!(stepMm > 0)) throw new RangeError(`The step between nested sizes is a length above 0, not ${stepMm}.`);
  const sizes: DieShape[] = [];
  const box = outlineBox(dieOutline({ shape: largest }));
  for (let i = 0; i < count; i++) {
    // A traced die's sisters lie at an even distance from it; stretching would make them narrower one way.
    const next = largest.kind !== 'outline' ? resizedShape(largest, box.w - i * stepMm, box.h - i * stepMm) : nestedOutline(largest.outline, (-i * stepMm) / 2);
    if (next === null) break;
    sizes.push(next);
  }
  return sizes;
}

function nestedOutline(outline: Outline, byMm: number): DieShape | null {
  const offset = offsetDie(outline, byMm);
  return offset === null ? null : { kind: 'outline', outline: offset };
}

export interface NeededDieOptions extends FitOptions {
  /** Default the ratio of the artwork with its border; 'of-shape' keeps that of the shape given. */
  ratio?: 'of-artwork' | 'of-shape';
  stitchInsetMm?: number;
}

/** A die larger than this is made by nobody. */
const LARGEST_MM = 1000;
/** Sizes are found to this, upwards. */
const SIZE_STEP_MM = 0.01;

/**
 * The smallest die of a kind, in one ratio of its sides, in which the artwork keeps the border; null where none up to a metre does.
 * Found by halving: border and size grow together.
 */
export function neededDie(artwork: Outline, shape: DieShape, borderMm: number, options: NeededDieOptions = {}): DieGeometry | null {
  const { ratio = 'of-artwork', stitchInsetMm, ...fitOptions } = options;
  const ink = outlineBox(artwork);
  const room = 2 * (borderMm + (stitchInsetMm ?? 0));
  const wanted = ratio === 'of-artwork' ? { w: ink.w + room, h: ink.h + room } : outlineBox(dieOutline({ shape }));
  const at = (widthMm: number): DieGeometry | null => {
    const sized = resizedShape(shape, widthMm, (widthMm * wanted.h) / wanted.w);
    return sized === null ? null : { shape: sized, ...(stitchInsetMm === undefined ? {} : { stitchInsetMm }) };
  };
  const enough = (widthMm: number): boolean => {
    const die = at(widthMm);
    return die !== null && bestFit(artwork, die, fitOptions).borderMm >= borderMm - 1e-6;
  };
  let high = wanted.w;
  while (!enough(high)) {
    high *= 1.25;
    if (high > LARGEST_MM || (high * wanted.h) / wanted.w > LARGEST_MM) return null;
  }
  let low = high / 2;
  while (low > 0 && enough(low)) { high = low; low /= 2; }
  while (high - low > SIZE_STEP_MM) {
    const middle = (low + high) / 2;
    if (enough(middle)) high = middle;
    else low = middle;
  }
  return at(high);
}

export interface CardFront { name: string; widthMm: number; heightMm: number }
export interface CardFrontNeeded {
  /** The layer of card that shows all round the label. */
  mat: { widthMm: number; heightMm: number };
  /** Mat and what is to show of the card round it. */
  front: { widthMm: number; heightMm: number };
  /** The smallest of the fronts given that is at least so large, and whether it is turned; null where none is. */
  smallest: { front: CardFront; turned: boolean } | null;
}

/** The other way round: which card front takes this label, with a mat of an even border and some of the card showing. */
export function smallestCardFront(die: DieGeometry, matBorderMm: number, showMm = 0, fronts: readonly CardFront[] = []): CardFrontNeeded {
  for (const length of [matBorderMm, showMm]) if (!(length >= 0 && Number.isFinite(length))) throw new RangeError(`A border is a length of 0 or more, not ${length}.`);
  const { w, h } = outlineBox(dieOutline(die));
  const mat = { widthMm: w + 2 * matBorderMm, heightMm: h + 2 * matBorderMm };
  const front = { widthMm: mat.widthMm + 2 * showMm, heightMm: mat.heightMm + 2 * showMm };
  let smallest: CardFrontNeeded['smallest'] = null;
  for (const one of fronts) {
    const turned = !holds(one.widthMm, one.heightMm, front);
    if (turned && !holds(one.heightMm, one.widthMm, front)) continue;
    if (smallest === null || one.widthMm * one.heightMm < smallest.front.widthMm * smallest.front.heightMm) smallest = { front: one, turned };
  }
  return { mat, front, smallest };
}

/** Cards are cut by hand: a hundredth of a millimetre is none. */
function holds(widthMm: number, heightMm: number, needed: { widthMm: number; heightMm: number }): boolean {
  return widthMm >= needed.widthMm - 0.01 && heightMm >= needed.heightMm - 0.01;
}
