/** What can be done with a batch as a whole. Its labels: lines.service.ts; its plans: plans.service.ts. */
import type { Knex } from 'knex';
import type { Batch, BatchCard, batchRoutes } from '../../contract/batches.ts';
import type { BodyOf, QueryOf } from '../../contract/route.ts';
import { newId } from '../../db/database.ts';
import type { PageOf } from '../../db/paging.ts';
import { invalid, notFound, stale } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import { recordAudit } from '../account/audit.queries.ts';
import { findGear, listGear } from '../gear/gear.queries.ts';
import { cardstocks, platforms, printers } from '../gear/gear-kinds.ts';
import { findSettings } from '../studio/studio.queries.ts';
import { sentimentsOf } from './batch-parts.ts';
import { findBatch, insertBatch, listBatches, setBatchDeleted, toBatch, updateBatch } from './batches.queries.ts';
import type { BatchChange, BatchRow } from './batches.queries.ts';
import { insertLines, linesOfBatch, toLine } from './lines.queries.ts';
import { newestPlan } from './plans.queries.ts';
import { proposedSheet } from './proposed-sheet.ts';

type Routes = typeof batchRoutes;
export interface Actor { id: string; name: string; address: string }

/** The batch as the pages see it. */
export async function wholeBatch(db: Knex, row: BatchRow): Promise<Batch> {
  const lines = await linesOfBatch(db, row.studio_id, row.id);
  const sentiments = await sentimentsOf(db, row.studio_id, lines);
  return toBatch(row, lines.map((line) => toLine(line, sentiments)), await newestPlan(db, row.studio_id, row.id));
}

export async function requiredBatch(db: Knex, studioId: string, id: string): Promise<BatchRow> {
  const row = await findBatch(db, studioId, id);
  if (!row) throw notFound('This batch');
  return row;
}

export function createBatchService({ db, events }: Deps) {
  const changed = (tx: Knex, studioId: string, id: string) => events.publish(tx, studioId, { type: 'changed', noun: 'batches', id });

  /** The only platform, or the first by name, and a run sheet that lies in it. */
  async function proposedGear(tx: Knex, studioId: string): Promise<Pick<BatchRow, 'platform_id' | 'printer_id' | 'sheet_width_mm' | 'sheet_height_mm'>> {
    const first = { limit: 1 };
    const [platform] = (await listGear(tx, platforms, studioId, first)).items;
    const [printer] = (await listGear(tx, printers, studioId, first)).items;
    const [stock] = (await listGear(tx, cardstocks, studioId, { ...first, sort: '-onHand' })).items;
    const sheet = proposedSheet(platform ?? null, stock ?? null);
    return { platform_id: platform?.id ?? null, printer_id: printer?.id ?? null, sheet_width_mm: sheet.widthMm, sheet_height_mm: sheet.heightMm };
  }

  async function checkGear(tx: Knex, studioId: string, { platform_id, printer_id }: BatchChange): Promise<void> {
    if (platform_id && !(await findGear(tx, platforms, studioId, platform_id))) throw invalid('This platform is not here.', [{ path: 'platformId', message: 'It may have been deleted.' }]);
    if (printer_id && !(await findGear(tx, printers, studioId, printer_id))) throw invalid('This printer is not here.', [{ path: 'printerId', message: 'It may have been deleted.' }]);
  }

  return {
    list: (studioId: string, query: QueryOf<Routes['GET /studios/:studioId/batches']>): Promise<PageOf<BatchCard>> => listBatches(db, studioId, query),

    async find(studioId: string, id: string): Promise<Batch> {
      return wholeBatch(db, await requiredBatch(db, studioId, id));
    },

    create: (studioId: string, body: BodyOf<Routes['POST /studios/:studioId/batches']>): Promise<Batch> =>
      db.transaction(async (tx) => {
        const settings = await findSettings(tx, studioId);
        const row = await insertBatch(tx, {
          id: newId(), studio_id: studioId, name: body.name, note: body.note, designs: body.designs, people: body.people, spares: body.spares,
          ...(await proposedGear(tx, studioId)), margin_mm: settings.marginMm, gap_mm: settings.gapMm, turn_tolerance_mm: settings.turnToleranceMm, max_feed_width_mm: null, turns: 'auto', aim: 'time',
        });
        await changed(tx, studioId, row.id);
        return wholeBatch(tx, row);
      }),

    change: (studioId: string, id: string, { version, ...body }: BodyOf<Routes['PATCH /studios/:studioId/batches/:id']>): Promise<Batch> =>
      db.transaction(async (tx) => {
        const change = toChange(body);
        await checkGear(tx, studioId, change);
        const row = await updateBatch(tx, studioId, id, version, change);
        if (!row) throw stale('This batch', await wholeBatch(tx, await requiredBatch(tx, studioId, id)));
        await changed(tx, studioId, id);
        return wholeBatch(tx, row);
      }),

    remove: (studioId: string, id: string, by: Actor): Promise<void> =>
      db.transaction(async (tx) => {
        const row = await setBatchDeleted(tx, studioId, id, true);
        if (!row) throw notFound('This batch');
        await recordAudit(tx, { studioId, personId: by.id, action: 'batch.deleted', about: row.name, address: by.address });
        await changed(tx, studioId, id);
      }),

    restore: (studioId: string, id: string): Promise<Batch> =>
      db.transaction(async (tx) => {
        const row = await setBatchDeleted(tx, studioId, id, false);
        if (!row) throw notFound('This batch');
        await changed(tx, studioId, id);
        return wholeBatch(tx, row);
      }),

    copy: (studioId: string, id: string, name: string): Promise<Batch> =>
      db.transaction(async (tx) => {
        const from = await requiredBatch(tx, studioId, id);
        const { state: _s, plan_job_id: _j, plan_stop_asked: _a, version: _v, content_version: _c, created_at: _m, updated_at: _u, deleted_at: _d, ...kept } = from;
        const row = await insertBatch(tx, { ...kept, id: newId(), name });
        const lines = await linesOfBatch(tx, studioId, id);
        await insertLines(tx, lines.map(({ pieces, version: _lineVersion, ...line }) => ({ ...line, id: newId(), batch_id: row.id, pieces: pieces.map(({ sentiment_id, ink_id }) => ({ sentiment_id, ink_id })) })));
        await changed(tx, studioId, row.id);
        return wholeBatch(tx, row);
      }),
  };
}

const FIELDS = {
  name: 'name', note: 'note', designs: 'designs', people: 'people', spares: 'spares', platformId: 'platform_id', printerId: 'printer_id', sheetWidthMm: 'sheet_width_mm', sheetHeightMm: 'sheet_height_mm',
  marginMm: 'margin_mm', gapMm: 'gap_mm', turnToleranceMm: 'turn_tolerance_mm', maxFeedWidthMm: 'max_feed_width_mm', turns: 'turns', aim: 'aim',
} as const;

function toChange(body: Partial<Record<keyof typeof FIELDS, unknown>>): BatchChange {
  const named = Object.entries(body).filter(([, value]) => value !== undefined);
  return Object.fromEntries(named.map(([field, value]) => [FIELDS[field as keyof typeof FIELDS], value]));
}
