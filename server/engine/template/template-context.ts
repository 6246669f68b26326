/** What all pages of one template share: order, plan, names and shapes; and the words that name a thing of the plan. */
import type { RunOrder, RunPlan, Setup } from '../gangrun/types.ts';
import { sheetFrame } from '../gangrun/sheet-frame.ts';
import type { SheetFrame } from '../gangrun/sheet-frame.ts';
import { letterOf, readLabels } from './labels.ts';
import type { PageContext, Swatch } from './page-layout.ts';
import { planShapes } from './plan-shapes.ts';
import type { PlaceShapes, PlanShapes } from './plan-shapes.ts';
import type { TemplateLabels, TemplateOptions } from './types.ts';

export interface TemplateContext extends PageContext {
  order: RunOrder;
  plan: RunPlan;
  labels: TemplateLabels;
  shapes: PlanShapes;
  frame: SheetFrame;
  /** Of an ink, the same on every page. */
  inkLetter(inkId: string): string;
}
export interface SetupContext extends TemplateContext { setup: Setup; index: number; number: number; side: string; places: PlaceShapes[] }

export function templateContext(order: RunOrder, plan: RunPlan, options: TemplateOptions): TemplateContext {
  const labels = readLabels(options.labels);
  const letters = new Map(order.inks.map((ink, i) => [ink.id, letterOf(i)]));
  return {
    order, plan, labels, shapes: planShapes(order), frame: sheetFrame(order),
    printer: options.printer, unit: options.unit, title: options.title, ...(labels.printerName === undefined ? {} : { printerName: labels.printerName }),
    inkLetter: (id) => letters.get(id) ?? '?',
  };
}

export function setupContext(context: TemplateContext, index: number): SetupContext {
  const setup = context.plan.setups[index] as Setup | undefined;
  if (setup === undefined) throw new RangeError(`The plan has no setup ${index}; it has ${context.plan.setups.length}, counted from 0.`);
  const first = context.labels.firstSetupNumber ?? 1;
  const number = first + index;
  const last = first + context.plan.setups.length - 1;
  return {
    ...context, setup, index, number, side: first === 1 ? `Setup ${number} of ${last}` : `Setup ${number}`,
    places: setup.placements.map((placement, i) => context.shapes.place(placement, i + 1)),
  };
}

export function inkName(context: TemplateContext, inkId: string): string {
  return context.labels.inks[inkId]?.name ?? `Ink ${context.inkLetter(inkId)}`;
}

export function dieName(context: TemplateContext, dieId: string): string {
  const index = context.order.dies.findIndex((die) => die.id === dieId);
  return context.labels.dies[dieId]?.name ?? `Die ${index + 1}`;
}

export function stampName(context: TemplateContext, stampId: string): string {
  const known = context.labels.sentiments[stampId];
  const index = context.order.stamps.findIndex((stamp) => stamp.id === stampId);
  return known?.name ?? known?.words ?? `Stamp ${index + 1}`;
}

/** Inks of the lines of some places, in the order of their letters. */
export function inksOf(context: SetupContext, places: readonly PlaceShapes[] = context.places): string[] {
  const used = new Set(places.flatMap((place) => place.labels.flatMap(({ lineId }) => context.shapes.line(lineId).pieces.map((piece) => piece.inkId))));
  const known = context.order.inks.map((ink) => ink.id).filter((id) => used.has(id));
  return [...known, ...[...used].filter((id) => !known.includes(id))];
}

export function swatchesOf(context: SetupContext): Swatch[] {
  return inksOf(context).map((id) => ({ letter: context.inkLetter(id), name: inkName(context, id), colour: context.labels.inks[id]?.colour }));
}

export function inkLetters(context: SetupContext, place: PlaceShapes): string {
  return inksOf(context, [place]).map(context.inkLetter).join('');
}

/** 1, 2, 3, 7 → “1–3, 7”. */
export function ranges(numbers: readonly number[]): string {
  const parts: string[] = [];
  for (let i = 0; i < numbers.length; ) {
    let k = i;
    while (k + 1 < numbers.length && numbers[k + 1] === numbers[k] + 1) k++;
    parts.push(k === i ? `${numbers[i]}` : k === i + 1 ? `${numbers[i]}, ${numbers[k]}` : `${numbers[i]}–${numbers[k]}`);
    i = k + 1;
  }
  return parts.join(', ');
}
