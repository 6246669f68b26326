/**
 * Pages of a list by cursor (keyset paging): the cursor names the last row of a page by its sort value and id, so rows that
 * come or go meanwhile neither repeat nor skip others.
 */
import type { Knex } from 'knex';
import { invalid } from '../errors/app-error.ts';

/** Expression to sort by, and the PostgreSQL type in which its values are compared. Must not be null. */
export interface SortBy { sql: string; type: 'text' | 'int' | 'float8' | 'timestamptz' }
export interface PageRequest { sort?: string; cursor?: string; limit: number }
export interface PageOf<T> { items: T[]; next: string | null; total: number }

/** `query` is the whole list, filtered and with its columns; `id` its unique column. */
export async function readPage<Row>(
  db: Knex, query: Knex.QueryBuilder, request: PageRequest, sorts: Record<string, SortBy>, fallback: string, id: string,
): Promise<PageOf<Row>> {
  const sort = request.sort ?? fallback;
  const descending = sort.startsWith('-');
  const by = sorts[sort.replace(/^-/, '')];
  const total = db.count('* as n').from(query.clone().as('all_rows')).first<{ n: number }>();

  const paged = query.clone().select(db.raw(`(${by.sql})::text AS page_value`), db.raw('??::text AS page_id', [id]));
  if (request.cursor !== undefined) {
    const [value, lastId] = readCursor(request.cursor, sort);
    paged.whereRaw(`((${by.sql}), ??) ${descending ? '<' : '>'} (?::${by.type}, ?::uuid)`, [id, value, lastId]);
  }
  paged.orderByRaw(`(${by.sql}) ${descending ? 'DESC' : 'ASC'}, ?? ${descending ? 'DESC' : 'ASC'}`, [id]).limit(request.limit + 1);

  const rows = (await paged) as (Row & { page_value: string; page_id: string })[];
  const items = rows.slice(0, request.limit);
  const last = items.at(-1);
  return { items, next: rows.length > request.limit && last ? writeCursor(sort, last.page_value, last.page_id) : null, total: (await total)?.n ?? 0 };
}

/** The text a person searches by, as a pattern in which her own `%` and `_` are only characters. */
export function containing(text: string): string {
  return `%${text.replace(/[\\%_]/g, '\\$&')}%`;
}

function writeCursor(sort: string, value: string, id: string): string {
  return Buffer.from(JSON.stringify([sort, value, id])).toString('base64url');
}

function readCursor(cursor: string, sort: string): [value: string, id: string] {
  try {
    const [cursorSort, value, id] = JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8')) as unknown[];
    if (cursorSort === sort && typeof value === 'string' && typeof id === 'string') return [value, id];
  } catch {
    // Falls through to the same answer.
  }
  throw invalid('This page of the list cannot be found again. Start from the first.');
}
