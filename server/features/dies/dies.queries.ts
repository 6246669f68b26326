/** Rows of `die_sets` and `dies`. */
import type { Knex } from 'knex';
import type { Die, DieSet } from '../../contract/dies.ts';
import { containing, readPage } from '../../db/paging.ts';
import type { PageOf, PageRequest } from '../../db/paging.ts';
import type { DieGeometry } from '../../engine/fit/types.ts';

export interface DieSetRow { id: string; studio_id: string; name: string; note: string; version: number; created_at: Date; updated_at: Date; deleted_at: Date | null }
const SET_COLUMNS = ['id', 'studio_id', 'name', 'note', 'version', 'created_at', 'updated_at', 'deleted_at'];

export interface DieRow {
  id: string; studio_id: string; die_set_id: string; name: string; geometry: DieGeometry; width_mm: number; height_mm: number; area_mm2: number;
  owned: number; version: number; updated_at: Date;
}
const DIE_COLUMNS = ['id', 'studio_id', 'die_set_id', 'name', 'geometry', 'width_mm', 'height_mm', 'area_mm2', 'owned', 'version', 'updated_at'].map((c) => `dies.${c}`);

export type NewDieRow = Omit<DieRow, 'version' | 'updated_at'>;
export type DieChange = Partial<Pick<DieRow, 'name' | 'geometry' | 'width_mm' | 'height_mm' | 'area_mm2' | 'owned'>>;

export function toDie(row: DieRow): Die {
  return {
    id: row.id, dieSetId: row.die_set_id, name: row.name, geometry: row.geometry, widthMm: row.width_mm, heightMm: row.height_mm, areaMm2: row.area_mm2,
    owned: row.owned, version: row.version, updatedAt: row.updated_at.toISOString(),
  };
}

export function toDieSet(row: DieSetRow, dies: readonly DieRow[]): DieSet {
  return {
    id: row.id, name: row.name, note: row.note, version: row.version, createdAt: row.created_at.toISOString(), updatedAt: row.updated_at.toISOString(),
    deletedAt: row.deleted_at?.toISOString() ?? null, dies: dies.map(toDie),
  };
}

export async function listDieSets(db: Knex, studioId: string, query: PageRequest & { search?: string; bin?: boolean }): Promise<PageOf<DieSet>> {
  const list = db('die_sets').where('die_sets.studio_id', studioId).select(SET_COLUMNS.map((c) => `die_sets.${c}`));
  if (query.bin) list.whereNotNull('die_sets.deleted_at');
  else list.whereNull('die_sets.deleted_at');
  if (query.search) {
    const pattern = containing(query.search);
    const named = db('dies').select(db.raw('1')).whereRaw('dies.studio_id = die_sets.studio_id AND dies.die_set_id = die_sets.id AND dies.deleted_at IS NULL').whereILike('dies.name', pattern);
    list.where((q) => q.whereILike('die_sets.name', pattern).orWhereILike('die_sets.note', pattern).orWhereExists(named));
  }
  const found = await readPage<DieSetRow>(db, list, query, {
    name: { sql: 'lower(die_sets.name)', type: 'text' },
    created: { sql: 'die_sets.created_at', type: 'timestamptz' },
    updated: { sql: 'die_sets.updated_at', type: 'timestamptz' },
  }, 'name', 'die_sets.id');
  const dies = await diesOfSets(db, studioId, found.items.map((row) => row.id));
  return { ...found, items: found.items.map((row) => toDieSet(row, dies.filter((die) => die.die_set_id === row.id))) };
}

/** Largest first, as a nested set lies. */
export function diesOfSets(db: Knex, studioId: string, setIds: readonly string[]): Promise<DieRow[]> {
  return db('dies').where({ studio_id: studioId, deleted_at: null }).whereIn('die_set_id', [...setIds]).orderBy([{ column: 'area_mm2', order: 'desc' }, 'id']).select<DieRow[]>(DIE_COLUMNS);
}

/** Of the sets that are not in the bin, smallest first: the order in which a die is chosen. */
export function allDies(db: Knex, studioId: string): Promise<(DieRow & { set_name: string })[]> {
  return db('dies').join('die_sets', (on) => on.on('die_sets.studio_id', 'dies.studio_id').andOn('die_sets.id', 'dies.die_set_id'))
    .where({ 'dies.studio_id': studioId, 'dies.deleted_at': null, 'die_sets.deleted_at': null })
    .orderBy(['dies.area_mm2', 'dies.id']).select([...DIE_COLUMNS, 'die_sets.name as set_name']);
}

/** For plans: also those that have gone to the bin since, so that a batch made with them can still be read. */
export function diesByIds(db: Knex, studioId: string, ids: readonly string[]): Promise<DieRow[]> {
  return db('dies').where({ studio_id: studioId }).whereIn('id', [...ids]).select<DieRow[]>(DIE_COLUMNS);
}

export function findDieSet(db: Knex, studioId: string, id: string): Promise<DieSetRow | undefined> {
  return db('die_sets').where({ studio_id: studioId, id, deleted_at: null }).first<DieSetRow>(SET_COLUMNS);
}

export async function insertDieSet(tx: Knex, row: Pick<DieSetRow, 'id' | 'studio_id' | 'name' | 'note'>): Promise<DieSetRow> {
  const [made] = await tx('die_sets').insert(row).returning<DieSetRow[]>(SET_COLUMNS);
  return made;
}

export async function updateDieSet(tx: Knex, studioId: string, id: string, version: number, change: Partial<Pick<DieSetRow, 'name' | 'note'>>): Promise<DieSetRow | undefined> {
  const [row] = await tx('die_sets').where({ studio_id: studioId, id, version, deleted_at: null })
    .update({ ...change, version: tx.raw('version + 1'), updated_at: tx.fn.now() }).returning<DieSetRow[]>(SET_COLUMNS);
  return row;
}

/** One of its dies changed; the set stands first where the list is sorted by that. */
export async function touchDieSet(tx: Knex, studioId: string, id: string): Promise<void> {
  await tx('die_sets').where({ studio_id: studioId, id }).update({ updated_at: tx.fn.now() });
}

export async function setDieSetDeleted(tx: Knex, studioId: string, id: string, deleted: boolean): Promise<DieSetRow | undefined> {
  return (await setDeleted<DieSetRow>(tx, 'die_sets', studioId, id, deleted, SET_COLUMNS))[0];
}

export async function insertDies(tx: Knex, rows: readonly NewDieRow[]): Promise<void> {
  if (rows.length > 0) await tx('dies').insert(rows.map((row) => ({ ...row, geometry: JSON.stringify(row.geometry) })));
}

export function findDie(db: Knex, studioId: string, id: string): Promise<DieRow | undefined> {
  return db('dies').where({ studio_id: studioId, id, deleted_at: null }).first<DieRow>(DIE_COLUMNS);
}

export async function updateDie(tx: Knex, studioId: string, id: string, version: number, { geometry, ...change }: DieChange): Promise<DieRow | undefined> {
  const [row] = await tx('dies').where({ studio_id: studioId, id, version, deleted_at: null })
    .update({ ...change, ...(geometry ? { geometry: JSON.stringify(geometry) } : {}), version: tx.raw('version + 1'), updated_at: tx.fn.now() }).returning<DieRow[]>(DIE_COLUMNS);
  return row;
}

export async function setDieDeleted(tx: Knex, studioId: string, id: string, deleted: boolean): Promise<DieRow | undefined> {
  return (await setDeleted<DieRow>(tx, 'dies', studioId, id, deleted, DIE_COLUMNS))[0];
}

async function setDeleted<Row>(tx: Knex, table: string, studioId: string, id: string, deleted: boolean, columns: string[]): Promise<Row[]> {
  const query = tx(table).where({ studio_id: studioId, id });
  const rows: unknown = await (deleted ? query.whereNull('deleted_at') : query.whereNotNull('deleted_at'))
    .update({ deleted_at: deleted ? tx.fn.now() : null, updated_at: tx.fn.now(), version: tx.raw('version + 1') }).returning(columns);
  return rows as Row[];
}
