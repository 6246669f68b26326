/** Rows of `batches`. Their lines: lines.queries.ts; their plans: plans.queries.ts. */
import type { Knex } from 'knex';
import type { Batch, BatchCard, BatchLine, BatchState } from '../../contract/batches.ts';
import { containing, readPage } from '../../db/paging.ts';
import type { PageOf, PageRequest } from '../../db/paging.ts';

export interface BatchRow {
  id: string; studio_id: string; name: string; note: string; state: BatchState; designs: number; people: number; spares: number;
  platform_id: string | null; printer_id: string | null; sheet_width_mm: number; sheet_height_mm: number; margin_mm: number; gap_mm: number; turn_tolerance_mm: number;
  max_feed_width_mm: number | null; turns: Batch['turns']; aim: Batch['aim']; plan_job_id: string | null; plan_stop_asked: boolean;
  version: number; content_version: number; created_at: Date; updated_at: Date; deleted_at: Date | null;
}
const COLUMNS = [
  'id', 'studio_id', 'name', 'note', 'state', 'designs', 'people', 'spares', 'platform_id', 'printer_id', 'sheet_width_mm', 'sheet_height_mm', 'margin_mm', 'gap_mm', 'turn_tolerance_mm',
  'max_feed_width_mm', 'turns', 'aim', 'plan_job_id', 'plan_stop_asked', 'version', 'content_version', 'created_at', 'updated_at', 'deleted_at',
];
export type NewBatchRow = Omit<BatchRow, 'state' | 'plan_job_id' | 'plan_stop_asked' | 'version' | 'content_version' | 'created_at' | 'updated_at' | 'deleted_at'>;
export type BatchChange = Partial<Omit<NewBatchRow, 'id' | 'studio_id'>>;

/** Changes that leave a plan as good as it was. */
const NOT_PLANNED: ReadonlySet<string> = new Set(['name', 'note', 'printer_id', 'designs', 'people', 'spares']);

interface Counts { lines: number; labels: number; sheets: number | null }
const counts = (db: Knex) => [
  db.raw('(SELECT count(*) FROM batch_lines l WHERE l.studio_id = batches.studio_id AND l.batch_id = batches.id) AS lines'),
  db.raw('(SELECT coalesce(sum(l.quantity + l.overs), 0) FROM batch_lines l WHERE l.studio_id = batches.studio_id AND l.batch_id = batches.id) AS labels'),
  db.raw(`(SELECT (p.totals ->> 'sheets')::int FROM plans p WHERE p.studio_id = batches.studio_id AND p.batch_id = batches.id ORDER BY p.number DESC LIMIT 1) AS sheets`),
];

function toCard(row: BatchRow & Counts): BatchCard {
  return {
    id: row.id, name: row.name, note: row.note, state: row.state, designs: row.designs, people: row.people, spares: row.spares, cards: row.designs * row.people + row.spares,
    lines: row.lines, labels: row.labels, sheets: row.sheets, version: row.version,
    createdAt: row.created_at.toISOString(), updatedAt: row.updated_at.toISOString(), deletedAt: row.deleted_at?.toISOString() ?? null,
  };
}

/** With what only the whole batch shows. */
export function toBatch(row: BatchRow, lineItems: BatchLine[], plan: { id: string; number: number; usedAt: string | null; contentVersion: number; sheets: number } | null): Batch {
  const labels = lineItems.reduce((sum, line) => sum + line.quantity + line.overs, 0);
  return {
    ...toCard({ ...row, lines: lineItems.length, labels, sheets: plan?.sheets ?? null }),
    platformId: row.platform_id, printerId: row.printer_id, sheetWidthMm: row.sheet_width_mm, sheetHeightMm: row.sheet_height_mm, marginMm: row.margin_mm, gapMm: row.gap_mm,
    turnToleranceMm: row.turn_tolerance_mm, maxFeedWidthMm: row.max_feed_width_mm, turns: row.turns, aim: row.aim, lineItems, planJobId: row.plan_job_id,
    plan: plan && { id: plan.id, number: plan.number, usedAt: plan.usedAt, outdated: plan.contentVersion !== row.content_version },
  };
}

export async function listBatches(db: Knex, studioId: string, query: PageRequest & { search?: string; bin?: boolean; state?: BatchState }): Promise<PageOf<BatchCard>> {
  const list = db('batches').where('batches.studio_id', studioId).select([...COLUMNS.map((column) => `batches.${column}`), ...counts(db)]);
  if (query.bin) list.whereNotNull('batches.deleted_at');
  else list.whereNull('batches.deleted_at');
  if (query.state) list.where('batches.state', query.state);
  if (query.search) {
    const pattern = containing(query.search);
    list.where((q) => q.whereILike('batches.name', pattern).orWhereILike('batches.note', pattern));
  }
  const found = await readPage<BatchRow & Counts>(db, list, query, {
    name: { sql: 'lower(batches.name)', type: 'text' },
    created: { sql: 'batches.created_at', type: 'timestamptz' },
    updated: { sql: 'batches.updated_at', type: 'timestamptz' },
    cards: { sql: 'batches.designs * batches.people + batches.spares', type: 'int' },
  }, '-updated', 'batches.id');
  return { ...found, items: found.items.map(toCard) };
}

export function findBatch(db: Knex, studioId: string, id: string): Promise<BatchRow | undefined> {
  return db<BatchRow>('batches').where({ studio_id: studioId, id, deleted_at: null }).first(COLUMNS);
}

/** Held to the end of the transaction, so that two people cannot number lines or plans at once. */
export function lockBatch(tx: Knex, studioId: string, id: string): Promise<BatchRow | undefined> {
  return tx<BatchRow>('batches').where({ studio_id: studioId, id, deleted_at: null }).forUpdate().first(COLUMNS);
}

export async function insertBatch(tx: Knex, row: NewBatchRow): Promise<BatchRow> {
  const [made] = await tx('batches').insert(row).returning<BatchRow[]>(COLUMNS);
  return made;
}

export async function updateBatch(tx: Knex, studioId: string, id: string, version: number, change: BatchChange): Promise<BatchRow | undefined> {
  const felt = Object.keys(change).some((column) => !NOT_PLANNED.has(column));
  const [row] = await tx('batches').where({ studio_id: studioId, id, version, deleted_at: null })
    .update({ ...change, version: tx.raw('version + 1'), ...(felt ? { content_version: tx.raw('content_version + 1') } : {}), updated_at: tx.fn.now() }).returning<BatchRow[]>(COLUMNS);
  return row;
}

/** Its lines changed: plans made before are out of date. */
export async function touchContent(tx: Knex, studioId: string, id: string): Promise<void> {
  await tx('batches').where({ studio_id: studioId, id }).update({ content_version: tx.raw('content_version + 1'), updated_at: tx.fn.now() });
}

export async function setBatchDeleted(tx: Knex, studioId: string, id: string, deleted: boolean): Promise<BatchRow | undefined> {
  const query = tx('batches').where({ studio_id: studioId, id });
  const [row] = await (deleted ? query.whereNull('deleted_at') : query.whereNotNull('deleted_at'))
    .update({ deleted_at: deleted ? tx.fn.now() : null, updated_at: tx.fn.now(), version: tx.raw('version + 1') }).returning<BatchRow[]>(COLUMNS);
  return row;
}

const ORDER: readonly BatchState[] = ['chosen', 'planned', 'printed', 'stamping', 'finished'];
/** On to a later state; never back. Printing and the bench call it. */
export async function advanceBatch(tx: Knex, studioId: string, id: string, state: BatchState): Promise<void> {
  await tx('batches').where({ studio_id: studioId, id }).whereIn('state', ORDER.slice(0, ORDER.indexOf(state))).update({ state, updated_at: tx.fn.now() });
}

export async function setPlanJob(tx: Knex, studioId: string, id: string, jobId: string): Promise<void> {
  await tx('batches').where({ studio_id: studioId, id }).update({ plan_job_id: jobId, plan_stop_asked: false });
}
export async function askToStopPlanning(tx: Knex, studioId: string, id: string): Promise<void> {
  await tx('batches').where({ studio_id: studioId, id }).update({ plan_stop_asked: true });
}
export async function isStopAsked(db: Knex, studioId: string, id: string, jobId: string): Promise<boolean> {
  const row = await db('batches').where({ studio_id: studioId, id, plan_job_id: jobId }).first<{ plan_stop_asked: boolean }>('plan_stop_asked');
  return row?.plan_stop_asked ?? false;
}
