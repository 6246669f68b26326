/** What is different from the version before, in words. Pure. */
import type { RunTotals } from '../../engine/gangrun/types.ts';
import { labelsMade } from './plan-totals.ts';
import type { StoredPlan, StoredRun } from './plans.queries.ts';

/** Nobody sets a stamp more exactly, mm. */
const SAME_PLACE_MM = 0.05;

type Compared = Pick<StoredPlan, 'runs' | 'totals'>;

export function planChanges(before: Compared, after: Compared): string[] {
  return [...figures(before.totals, after.totals), ...lines(before, after), ...settings(before, after), ...places(before, after)];
}

const FIGURES: readonly [keyof RunTotals, string, string][] = [['setups', 'setup', 'setups'], ['presses', 'press', 'presses'], ['sheets', 'sheet', 'sheets'], ['cutPasses', 'cut pass', 'cut passes']];

function figures(before: RunTotals, after: RunTotals): string[] {
  const counted = FIGURES.filter(([key]) => before[key] !== after[key]).map(([key, one, many]) => `${after[key]} ${after[key] === 1 ? one : many} instead of ${before[key]}.`);
  const [was, is] = [Math.round(before.minutes), Math.round(after.minutes)];
  return was === is ? counted : [...counted, `About ${is} minutes instead of ${was}.`];
}

function lines(before: Compared, after: Compared): string[] {
  const [was, is] = [labelsByLine(before), labelsByLine(after)];
  const added = [...is].filter(([id]) => !was.has(id)).map(([, line]) => `“${line.title}” is new: ${line.labels}.`);
  const gone = [...was].filter(([id]) => !is.has(id)).map(([, line]) => `“${line.title}” is no longer made.`);
  const changed = [...is].filter(([id, line]) => was.has(id) && was.get(id)!.labels !== line.labels).map(([id, line]) => `“${line.title}”: ${line.labels} instead of ${was.get(id)!.labels}.`);
  return [...added, ...gone, ...changed];
}

function labelsByLine({ runs }: Compared): Map<string, { title: string; labels: number }> {
  const made = new Map<string, { title: string; labels: number }>();
  for (const run of runs) {
    for (const { lineId } of run.plan.setups.flatMap((setup) => setup.presses.flatMap((press) => press.inked))) {
      const so = made.get(lineId);
      made.set(lineId, { title: run.names.lines[lineId]?.title ?? 'A label', labels: (so?.labels ?? 0) + 1 });
    }
  }
  return made;
}

function settings(before: Compared, after: Compared): string[] {
  const was = before.runs.at(0)?.order, is = after.runs.at(0)?.order;
  if (!was || !is) return [];
  const changes: string[] = [];
  if (was.sheet.widthMm !== is.sheet.widthMm || was.sheet.heightMm !== is.sheet.heightMm) changes.push('The run sheet has another size.');
  if (JSON.stringify(was.platform) !== JSON.stringify(is.platform)) changes.push('The platform is another one, or was measured anew.');
  if (was.turns !== is.turns) changes.push('The turns of the sheet were set differently.');
  const dies = (run: StoredRun[]) => new Map(run.flatMap(({ order }) => order.lines.map((line) => [line.id, line.dieId] as const)));
  const [diesBefore, diesAfter] = [dies(before.runs), dies(after.runs)];
  const recut = [...diesAfter].filter(([id, die]) => diesBefore.has(id) && diesBefore.get(id) !== die).length;
  if (recut > 0) changes.push(recut === 1 ? 'One label has another die.' : `${recut} labels have other dies.`);
  return changes;
}

/** Places that a stamp has left, told once a plan. */
function places(before: Compared, after: Compared): string[] {
  const stand = ({ runs }: Compared) => runs.flatMap(({ plan }) => plan.setups.flatMap((setup, at) => setup.placements.map((place) => ({ at, place }))));
  const earlier = stand(before);
  const moved = stand(after).filter(({ at, place }) => !earlier.some((other) =>
    other.at === at && other.place.stamps[0].stampId === place.stamps[0].stampId && Math.hypot(other.place.x - place.x, other.place.y - place.y) < SAME_PLACE_MM && other.place.rotationDeg === place.rotationDeg)).length;
  if (moved === 0) return labelsMadeSame(before, after) ? ['Every stamp stands where it stood.'] : [];
  return [moved === 1 ? 'One stamp stands elsewhere.' : `${moved} stamps stand elsewhere.`];
}

function labelsMadeSame(before: Compared, after: Compared): boolean {
  const count = ({ runs }: Compared) => runs.reduce((sum, run) => sum + labelsMade(run.plan), 0);
  return count(before) === count(after);
}
