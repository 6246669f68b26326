/** Tries several run sheets for a batch, with a small search each, and tells what they would take. Nothing is stored but the job's result. */
import { z } from 'zod';
import type { SheetComparison } from '../../contract/plans.ts';
import type { CutPlan } from '../../engine/cutplan/types.ts';
import type { RunPlan } from '../../engine/gangrun/types.ts';
import { conflict } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import type { JobContext, JobDefinition } from '../../jobs/types.ts';
import { orderParts } from './batch-parts.ts';
import { findBatch } from './batches.queries.ts';
import { assembleRuns } from './run-order.ts';
import type { AssembledRun, OrderParts } from './run-order.ts';
import { sheetSizes } from './sheet-sizes.ts';
import type { SheetSize } from './sheet-sizes.ts';

export const COMPARE_SHEETS = { kind: 'compare-sheets' } as const;
const LIMIT_MS = 180_000;
const EFFORT = 0.2;

const Payload = z.object({ batchId: z.uuid() });
type Payload = z.output<typeof Payload>;

export function compareSheetsJob({ db }: Pick<Deps, 'db'>): JobDefinition<Payload, SheetComparison> {
  return {
    ...COMPARE_SHEETS,
    payload: Payload,
    timeLimitMs: LIMIT_MS,
    async run({ batchId }, context) {
      const batch = await findBatch(db, context.studioId, batchId);
      if (!batch) throw conflict('batch-gone', 'The batch was deleted in the meantime.');
      const parts = await orderParts(db, batch);
      const runs = assembleRuns(parts).filter((run) => run.order.lines.length > 0);
      const stock = runs.map((run) => parts.cardstocks.get(run.cardstockId ?? '')).find((one) => one !== undefined);
      if (!stock) throw conflict('no-cardstock', 'Choose a cardstock and dies for the labels first: run sheets are cut from it.');
      const sizes = sheetSizes(stock, runs[0].order.platform, batch.margin_mm);
      const items: SheetComparison['items'] = [];
      for (const [i, size] of sizes.entries()) {
        context.onProgress(i / sizes.length, 'Trying run sheets');
        const tried = await trySize(runs, parts, size, context);
        if (tried) items.push(tried);
      }
      const bySheets = (a: (typeof items)[number], b: (typeof items)[number]) => a.stockSheets - b.stockSheets || a.minutes - b.minutes;
      const byTime = (a: (typeof items)[number], b: (typeof items)[number]) => a.minutes - b.minutes || a.stockSheets - b.stockSheets;
      return { items: items.sort((a, b) => a.unplaced - b.unplaced || (batch.aim === 'sheets' ? bySheets(a, b) : byTime(a, b))) };
    },
    save: async (_tx, _payload, output) => output,
  };
}

/** Null where a cardstock of the batch does not give this size. */
async function trySize(runs: readonly AssembledRun[], parts: OrderParts, size: SheetSize, { engine }: JobContext): Promise<SheetComparison['items'][number] | null> {
  const sum = { ...size, stockSheets: 0, sheets: 0, presses: 0, minutes: 0, unplaced: 0 };
  for (const { order, cardstockId } of runs) {
    const quiet = { onProgress: () => undefined };
    const plan = await engine.run<RunPlan>('planGangRun', { order: { ...order, effort: EFFORT, sheet: { ...order.sheet, ...size } } }, quiet);
    const stock = parts.cardstocks.get(cardstockId ?? '');
    if (stock && plan.totals.sheets > 0) {
      const [a, b] = [stock, size].map(({ widthMm, heightMm }) => [widthMm, heightMm].sort((p, q) => p - q));
      if (b[0] > a[0] || b[1] > a[1]) return null;
      const cuts = await engine.run<CutPlan>('planCuts', { parts: [{ id: 'run sheet', ...size, quantity: plan.totals.sheets, keepDirection: false }], stock: { widthMm: stock.widthMm, heightMm: stock.heightMm } }, quiet);
      sum.stockSheets += cuts.sheets;
    }
    sum.sheets += plan.totals.sheets;
    sum.presses += plan.totals.presses;
    sum.minutes += plan.totals.minutes;
    sum.unplaced += plan.unplaced.length;
  }
  return sum;
}
