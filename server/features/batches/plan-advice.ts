/**
 * Why a plan is as it is, and what would help, in words. Pure: the what-ifs are orders for the planner, and a sentence for what
 * comes of each. A saving is told only where the planner has found it.
 */
import type { PlanNames } from '../../contract/plans.ts';
import type { RunOrder, RunPlan } from '../../engine/gangrun/types.ts';

/** Half a minute more or less is no saving to anybody. */
const TELLABLE_MINUTES = 1;

const counted = (n: number, one: string, many = `${one}s`) => `${n} ${n === 1 ? one : many}`;
const titleOf = (names: PlanNames, lineId: string) => names.lines[lineId]?.title ?? 'a label';

export function reasons(order: RunOrder, plan: RunPlan, names: PlanNames): string[] {
  if (plan.totals.sheets === 0) return [];
  return [...pressReason(order, plan, names), ...sheetReason(plan), ...setupReason(plan, names)];
}

/** The stamp that is pressed most often sets the number of presses, however well the rest is arranged. */
function pressReason(order: RunOrder, plan: RunPlan, names: PlanNames): string[] {
  const busiest = busiestStamp(order, plan);
  if (!busiest || plan.totals.presses > busiest.presses) return [];
  const copies = busiest.owned === 1 ? 'one stamp' : `${busiest.owned} stamps`;
  return [`“${names.sentiments[busiest.id]?.name ?? 'One sentiment'}” is wanted ${busiest.labels} times from ${copies}: that alone takes ${counted(busiest.presses, 'press', 'presses')}.`];
}

function sheetReason({ totals, atLeast }: RunPlan): string[] {
  const covered = totals.sheets * (1 - totals.wastePercent / 100);
  const words = `The labels alone cover ${covered.toFixed(1)} of the ${counted(totals.sheets, 'sheet')}.`;
  if (totals.sheets <= atLeast.sheets) return [`${words} Fewer sheets are impossible.`];
  return [`${words} Fewer than ${counted(atLeast.sheets, 'sheet')} is impossible.`];
}

function setupReason(plan: RunPlan, names: PlanNames): string[] {
  if (plan.setups.length < 2) return [];
  const [, ...later] = plan.setups;
  const parts = later.map((setup, i) => `setup ${i + 2} makes ${[...new Set(setup.placements.flatMap(({ lineIds }) => lineIds.map((id) => `“${titleOf(names, id)}”`)))].join(', ')}`);
  const forced = plan.atLeast.setups >= plan.setups.length ? 'The stamps cannot all stand on the sheet at once' : 'Not all stamps stand on the sheet together';
  return [`${forced}: ${parts.join('; ')}.`];
}

export interface WhatIf { order: RunOrder; /** Null where nothing is saved. */ words: (other: RunPlan) => string | null }

/** A few, each with a search much smaller than the plan's own. */
export function whatIfs(order: RunOrder, plan: RunPlan, names: PlanNames): WhatIf[] {
  const found: WhatIf[] = [];
  const add = (change: Partial<RunOrder>, lead: string) => found.push({ order: { ...order, ...change, pinned: undefined, effort: WHAT_IF_EFFORT }, words: (other) => saving(lead, plan, other) });
  if (order.turns === 'none') add({ turns: 'half' }, 'A half turn of the sheet between presses');
  const die = busiestDie(plan);
  if (die) add({ dies: order.dies.map((one) => (one.id === die ? { ...one, owned: one.owned + 1 } : one)) }, `One more copy of the die “${names.dies[die]?.name ?? 'used most'}”`);
  const stamp = busiestStamp(order, plan);
  if (stamp) add({ stamps: order.stamps.map((one) => (one.id === stamp.id ? { ...one, owned: one.owned + 1 } : one)) }, `One more copy of the stamp “${names.sentiments[stamp.id]?.name ?? 'pressed most'}”`);
  return found;
}
const WHAT_IF_EFFORT = 0.3;

function saving(lead: string, now: RunPlan, other: RunPlan): string | null {
  // A plan that leaves labels out saves nothing.
  if (other.unplaced.length > now.unplaced.length) return null;
  const sheets = now.totals.sheets - other.totals.sheets, minutes = Math.round(now.totals.minutes - other.totals.minutes), passes = now.totals.cutPasses - other.totals.cutPasses;
  const saved = [...(sheets > 0 ? [counted(sheets, 'sheet')] : []), ...(passes > 0 ? [counted(passes, 'cut pass', 'cut passes')] : []), ...(minutes >= TELLABLE_MINUTES ? [counted(minutes, 'minute')] : [])];
  if (saved.length === 0) return null;
  const list = saved.length === 1 ? saved[0] : `${saved.slice(0, -1).join(', ')} and ${saved[saved.length - 1]}`;
  return `${lead} would save ${list}.`;
}

function busiestStamp(order: RunOrder, plan: RunPlan): { id: string; labels: number; owned: number; presses: number } | null {
  const left = new Set(plan.unplaced.map(({ lineId }) => lineId));
  const labels = new Map<string, number>();
  for (const line of order.lines) {
    if (left.has(line.id)) continue;
    for (const { stampId } of line.pieces) labels.set(stampId, (labels.get(stampId) ?? 0) + line.quantity + line.overs);
  }
  const all = order.stamps.filter(({ id, owned }) => labels.has(id) && owned > 0).map(({ id, owned }) => ({ id, owned, labels: labels.get(id)!, presses: Math.ceil(labels.get(id)! / owned) }));
  return all.sort((a, b) => b.presses - a.presses)[0] ?? null;
}

function busiestDie(plan: RunPlan): string | null {
  const cuts = new Map<string, number>();
  for (const { dieId } of plan.cutPasses.flatMap((pass) => pass.cuts)) cuts.set(dieId, (cuts.get(dieId) ?? 0) + 1);
  return [...cuts].sort((a, b) => b[1] - a[1])[0]?.[0] ?? null;
}
