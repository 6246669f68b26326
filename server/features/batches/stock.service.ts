/** How the run sheets of a plan are cut from the cardstock on hand. */
import type { StockCutting } from '../../contract/plans.ts';
import type { CutPart, CutPlan } from '../../engine/cutplan/types.ts';
import { notFound } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import { gearByIds } from '../gear/gear.queries.ts';
import { cardstocks } from '../gear/gear-kinds.ts';
import { planById } from './plans.queries.ts';

export function createStockService({ db, engine }: Pick<Deps, 'db' | 'engine'>) {
  return {
    async cutting(studioId: string, batchId: string, planId: string): Promise<{ items: StockCutting[] }> {
      const plan = await planById(db, studioId, planId);
      if (!plan || plan.batchId !== batchId) throw notFound('This plan');
      const stocks = await gearByIds(db, cardstocks, studioId, plan.runs.map((run) => run.cardstockId).filter((id) => id !== null));
      const items: StockCutting[] = [];
      for (const run of plan.runs) {
        const stock = stocks.find(({ id }) => id === run.cardstockId);
        const quantity = run.plan.totals.sheets;
        if (!stock || quantity === 0) continue;
        const { widthMm, heightMm } = run.order.sheet;
        const parts: CutPart[] = [{ id: 'run sheet', widthMm, heightMm, quantity, keepDirection: false }];
        const cardstock = { id: stock.id, name: stock.name, colour: stock.colour, widthMm: stock.widthMm, heightMm: stock.heightMm, onHand: stock.onHand };
        const pieces = [{ what: 'Run sheet', widthMm, heightMm, quantity }];
        const cutPlan = comesOutOf(stock, run.order.sheet) ? await engine.run<CutPlan>('planCuts', { parts, stock: { widthMm: stock.widthMm, heightMm: stock.heightMm } }) : null;
        items.push({ cardstock, pieces, cutPlan, problem: cutPlan ? null : 'The run sheet is larger than a sheet of this cardstock. Choose a smaller run sheet or another cardstock.' });
      }
      return { items };
    },
  };
}

/** Rounding of sizes in inches, mm. */
const ROUNDING_MM = 1e-6;
interface Size { widthMm: number; heightMm: number }

/** Either way round. */
function comesOutOf(stock: Size, sheet: Size): boolean {
  const [a, b] = [stock, sheet].map(({ widthMm, heightMm }) => [widthMm, heightMm].sort((p, q) => p - q));
  return b[0] <= a[0] + ROUNDING_MM && b[1] <= a[1] + ROUNDING_MM;
}
