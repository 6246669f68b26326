/** The bench as the plan and the records say, with what still waits to be sent laid over them. Pure. */
import type { RunPlan, Setup } from '../../../server/engine/gangrun/types.ts';
import type { Bench, Outcome } from '../../api/bench.ts';
import type { Plan } from '../../api/batches.ts';
import type { Waiting } from '../../stores/bench-queue.ts';

type Run = Plan['runs'][number];
export interface BenchImpression { placement: number; lineId: string; outcome: Outcome; restamps: number; reason: string; note: string }
export interface BenchStep {
  run: Run;
  /** Of the run, and through the whole plan. */
  number: number; overall: number;
  setup: Setup; setupNumber: number;
  sheet: number; turn: number;
  takeOff: number[];
  inked: { placement: number; lineId: string }[];
  done: { by: string; at: string } | null;
  impressions: BenchImpression[];
}

const clean = (inked: { placement: number; lineId: string }): BenchImpression => ({ ...inked, outcome: 'clean', restamps: 0, reason: '', note: '' });

/** All presses in their order. */
export function benchSteps(plan: Plan, bench: Bench, waiting: readonly Waiting[]): BenchStep[] {
  let overall = 0, setupNumber = 0;
  const steps = plan.runs.flatMap((run) => {
    let number = 0;
    return run.plan.setups.flatMap((setup) => {
      setupNumber++;
      const mine = setupNumber;
      return setup.presses.map((press): BenchStep => {
        number++;
        overall++;
        const record = bench.presses.find((row) => row.runId === run.id && row.number === number);
        return {
          run, number, overall, setup, setupNumber: mine, sheet: press.sheet, turn: press.turn, takeOff: press.takeOff, inked: press.inked,
          done: record ? { by: record.doneBy, at: record.doneAt } : null,
          impressions: press.inked.map((inked) => record?.impressions.find((row) => row.placement === inked.placement) ?? clean(inked)),
        };
      });
    });
  });
  for (const row of waiting) if (row.kind !== 'cut') lay(steps, row);
  return steps;
}

function lay(steps: BenchStep[], row: Exclude<Waiting, { kind: 'cut' }>): void {
  const step = steps.find((one) => one.run.id === row.body.runId && one.number === row.body.number);
  if (!step) return;
  if (row.kind === 'undo') {
    step.done = null;
    step.impressions = step.inked.map(clean);
  } else if (row.kind === 'press') {
    step.done ??= { by: 'you', at: new Date().toISOString() };
    step.impressions = step.impressions.map((one) => ({ ...one, ...row.body.impressions?.find((told) => told.placement === one.placement) }));
  } else step.impressions = step.impressions.map((one) => (one.placement === row.body.placement ? { ...one, outcome: row.body.outcome, restamps: row.body.restamps ?? 0, reason: row.body.reason ?? '', note: row.body.note ?? '' } : one));
}

export interface LineCount { lineId: string; title: string; needed: number; overs: number; made: number; spoilt: number; restamps: number }

/** Labels made against labels needed; a label counts where its impression is clean, stamped again or not. */
export function lineCounts(plan: Plan, steps: readonly BenchStep[]): LineCount[] {
  return plan.runs.flatMap((run) => run.order.lines.filter((line) => run.plan.setups.some((setup) => setup.placements.some((place) => place.lineIds.includes(line.id)))).map((line) => {
    const of = steps.filter((step) => step.run.id === run.id && step.done).flatMap((step) => step.impressions).filter((one) => one.lineId === line.id);
    const made = of.filter((one) => one.outcome === 'clean').length;
    return { lineId: line.id, title: run.names.lines[line.id]?.title ?? 'Label', needed: line.quantity, overs: line.overs, made, spoilt: of.length - made, restamps: of.reduce((n, one) => n + one.restamps, 0) };
  }));
}

export interface CutStep { runId: string; number: number; sheet: number; words: string; done: boolean }

export function cutSteps(plan: Plan, bench: Bench, waiting: readonly Waiting[]): CutStep[] {
  return plan.runs.flatMap((run) => run.plan.cutPasses.map((pass, i) => {
    const told = waiting.filter((row) => row.kind === 'cut' && row.body.runId === run.id && row.body.number === i + 1).at(-1);
    const done = told?.kind === 'cut' ? told.body.done : bench.cutPasses.some((row) => row.runId === run.id && row.number === i + 1);
    return { runId: run.id, number: i + 1, sheet: pass.sheet, words: passWords(run.plan, pass, run), done };
  }));
}

function passWords(plan: RunPlan, pass: RunPlan['cutPasses'][number], run: Run): string {
  const setup = plan.setups.find((one) => one.presses.some((press) => press.sheet === pass.sheet))!;
  const numbers = new Map(setup.placements.map((place, i) => [place.id, i + 1]));
  return pass.cuts.map((cut) => `${run.names.dies[cut.dieId]?.name ?? 'die'} on ${numbers.get(cut.placement)}${setup.turns > 1 && cut.turn > 0 ? ` (turn ${cut.turn + 1})` : ''}`).join(', ');
}

const TURNS: Record<number, string[]> = { 1: [''], 2: ['', 'turned half round'], 4: ['', 'turned a quarter clockwise', 'turned half round', 'turned three quarters clockwise'] };
/** How the sheet lies now. */
export function sheetWords(step: BenchStep): string {
  const turn = TURNS[step.setup.turns][step.turn];
  return step.turn === 0 ? `Lay in sheet ${step.sheet}` : `Sheet ${step.sheet} again, ${turn}`;
}

/** The next one up when a label is tapped. */
export const AFTER: Record<Outcome, Outcome> = { clean: 'missed', missed: 'smudged', smudged: 'skipped', skipped: 'clean' };
export const OUTCOMES: readonly { value: Outcome; label: string }[] = [{ value: 'clean', label: 'Clean' }, { value: 'missed', label: 'Missed' }, { value: 'smudged', label: 'Smudged' }, { value: 'skipped', label: 'Skipped' }];
export const REASONS = ['', 'Too little ink', 'Not pressed down', 'Moved', 'Dirt on the stamp', 'Stamp not clean', 'Other'].map((value) => ({ value, label: value || 'No reason given' }));
