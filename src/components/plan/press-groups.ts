/** The presses of a setup, those in a row that say the same told as one. Numbers are those on the drawing. Pure. */
import type { PlanNames } from '../../api/batches.ts';
import type { Press, RunLine, Setup } from '../../../server/engine/gangrun/types.ts';

export interface PressGroup { presses: string; sheets: string; turn: string; inks: { name: string; colour: string; numbers: string }[]; takeOff: string }

const TURN_WORDS: Record<number, string[]> = { 1: ['as it is'], 2: ['as it is', 'half turn'], 4: ['as it is', 'quarter turn', 'half turn', 'three quarters'] };

/** A placement's number is its place in the setup, from 1. */
export function pressGroups(setup: Setup, lines: readonly RunLine[], names: PlanNames): PressGroup[] {
  const inksOf = new Map(lines.map((line) => [line.id, [...new Set(line.pieces.map((piece) => piece.inkId))]]));
  const number = new Map(setup.placements.map((placement, i) => [placement.id, i + 1]));
  const described = setup.presses.map((press, i) => ({ at: i + 1, press, key: JSON.stringify([turnsTogether(setup, press), press.takeOff, press.inked]) }));
  const runs: (typeof described)[] = [];
  for (const one of described) {
    const last = runs.at(-1);
    if (last && one.press.takeOff.length === 0 && last[0].key === JSON.stringify([turnsTogether(setup, one.press), last[0].press.takeOff, one.press.inked])) last.push(one);
    else runs.push([one]);
  }
  return runs.map((run) => {
    const [first] = run;
    const inks = new Map<string, number[]>();
    for (const { placement, lineId } of first.press.inked) for (const ink of inksOf.get(lineId) ?? []) inks.set(ink, [...(inks.get(ink) ?? []), number.get(placement)!]);
    return {
      presses: span(run.map(({ at }) => at)), sheets: span(run.map(({ press }) => press.sheet)), turn: TURN_WORDS[setup.turns][first.press.turn],
      inks: [...inks].map(([id, numbers]) => ({ name: names.inks[id]?.name ?? 'Ink', colour: names.inks[id]?.colour ?? 'transparent', numbers: numbers.sort((a, b) => a - b).join(', ') })),
      takeOff: first.press.takeOff.map((id) => number.get(id)!).sort((a, b) => a - b).join(', '),
    };
  });
}

/** Turned presses are told one by one: the sheet is taken up between them. */
function turnsTogether(setup: Setup, press: Press): number {
  return setup.turns === 1 ? 0 : press.turn;
}

/** Runs of whole numbers, which only ever rise: `1–4`. */
function span(numbers: readonly number[]): string {
  const first = numbers[0], last = numbers[numbers.length - 1];
  return first === last ? String(first) : `${first}–${last}`;
}
