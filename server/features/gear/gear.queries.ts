/** SQL of every kind of gear, and the door by which batches read it. */
import type { Knex } from 'knex';
import { newId } from '../../db/database.ts';
import { containing, readPage } from '../../db/paging.ts';
import type { PageOf, PageRequest } from '../../db/paging.ts';
import type { FieldsOf, GearItem, GearKind } from './gear-kinds.ts';

type Row = Record<string, never> & { id: string; version: number; created_at: Date; updated_at: Date; deleted_at: Date | null };
export interface GearQuery extends PageRequest { search?: string; bin?: boolean }

const columnsOf = (kind: { columns: readonly string[] }) => ['id', ...kind.columns, 'version', 'created_at', 'updated_at', 'deleted_at'];

function toItem<I extends GearItem>(kind: GearKind<I>, row: Row): I {
  const common = { id: row.id, version: row.version, createdAt: row.created_at.toISOString(), updatedAt: row.updated_at.toISOString(), deletedAt: row.deleted_at?.toISOString() ?? null };
  return { ...kind.fromRow(row), ...common } as unknown as I;
}

export async function listGear<I extends GearItem>(db: Knex, kind: GearKind<I>, studioId: string, query: GearQuery): Promise<PageOf<I>> {
  const rows = db(kind.table).where({ studio_id: studioId }).select(columnsOf(kind));
  if (query.bin) rows.whereNotNull('deleted_at');
  else rows.whereNull('deleted_at');
  if (query.search) {
    const pattern = containing(query.search);
    rows.where((q) => q.whereILike('name', pattern).orWhereILike('note', pattern));
  }
  const found = await readPage<Row>(db, rows, query, kind.sorts, 'name', 'id');
  return { ...found, items: found.items.map((row) => toItem(kind, row)) };
}

/** Null where it is not in this studio, or in the bin. */
export async function findGear<I extends GearItem>(db: Knex, kind: GearKind<I>, studioId: string, id: string): Promise<I | null> {
  const row = await db(kind.table).where({ studio_id: studioId, id }).whereNull('deleted_at').first<Row>(columnsOf(kind));
  return row ? toItem(kind, row) : null;
}

/** Those in the bin too: what was planned with them still shows them. */
export async function gearByIds<I extends GearItem>(db: Knex, kind: GearKind<I>, studioId: string, ids: readonly string[]): Promise<I[]> {
  const rows = await db(kind.table).where({ studio_id: studioId }).whereIn('id', [...ids]).select<Row[]>(columnsOf(kind));
  return rows.map((row) => toItem(kind, row));
}

export async function insertGear<I extends GearItem>(db: Knex, kind: GearKind<I>, studioId: string, fields: FieldsOf<I>): Promise<I> {
  const [row] = await db(kind.table).insert({ id: newId(), studio_id: studioId, ...kind.toRow(fields) }).returning<Row[]>(columnsOf(kind));
  return toItem(kind, row);
}

/** Null where the version is not the current one. */
export async function updateGear<I extends GearItem>(db: Knex, kind: GearKind<I>, studioId: string, id: string, version: number, change: Partial<FieldsOf<I>>): Promise<I | null> {
  const [row] = await db(kind.table)
    .where({ studio_id: studioId, id, version })
    .whereNull('deleted_at')
    .update({ ...kind.toRow(change), version: version + 1, updated_at: db.fn.now() })
    .returning<Row[]>(columnsOf(kind));
  return row ? toItem(kind, row) : null;
}

/** Into the bin or out of it; null where it is not there to be moved. */
export async function binGear<I extends GearItem>(db: Knex, kind: GearKind<I>, studioId: string, id: string, deleted: boolean): Promise<I | null> {
  const rows = db(kind.table).where({ studio_id: studioId, id });
  const [row] = await (deleted ? rows.whereNull('deleted_at') : rows.whereNotNull('deleted_at'))
    .update({ deleted_at: deleted ? db.fn.now() : null, updated_at: db.fn.now(), version: db.raw('version + 1') })
    .returning<Row[]>(columnsOf(kind));
  return row ? toItem(kind, row) : null;
}
