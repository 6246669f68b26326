/** What is done with gear of one kind: the same for platforms, printers, cardstocks and inks. */
import type { Knex } from 'knex';
import { invalid, notFound, stale } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import { recordAudit } from '../account/audit.queries.ts';
import { binGear, findGear, insertGear, listGear, updateGear } from './gear.queries.ts';
import type { GearQuery } from './gear.queries.ts';
import type { FieldsOf, GearItem, GearKind } from './gear-kinds.ts';

export type { GearQuery };

/** Who does it and from where, for the audit log. */
export interface Actor { personId: string; address: string }

export function createGearService<I extends GearItem>({ db, events }: Pick<Deps, 'db' | 'events'>, kind: GearKind<I>) {
  const tell = (tx: Knex, studioId: string, id: string) => events.publish(tx, studioId, { type: 'changed', noun: kind.table, id });

  async function required(tx: Knex, studioId: string, id: string): Promise<I> {
    const item = await findGear(tx, kind, studioId, id);
    if (!item) throw notFound(kind.one);
    return item;
  }

  return {
    list: (studioId: string, query: GearQuery) => listGear(db, kind, studioId, query),
    find: (studioId: string, id: string) => required(db, studioId, id),

    add: (studioId: string, fields: FieldsOf<I>): Promise<I> =>
      db.transaction(async (tx) => {
        const item = await insertGear(tx, kind, studioId, checked(kind, fields));
        await tell(tx, studioId, item.id);
        return item;
      }),

    change: (studioId: string, id: string, version: number, change: Partial<FieldsOf<I>>): Promise<I> =>
      db.transaction(async (tx) => {
        const now = await required(tx, studioId, id);
        if (now.version !== version) throw stale(kind.one, now);
        checked(kind, { ...now, ...change });
        const item = await updateGear(tx, kind, studioId, id, version, change);
        // Somebody was faster between the two statements.
        if (!item) throw stale(kind.one, await required(tx, studioId, id));
        await tell(tx, studioId, id);
        return item;
      }),

    remove: (studioId: string, id: string, by: Actor): Promise<void> =>
      db.transaction(async (tx) => {
        const item = await binGear(tx, kind, studioId, id, true);
        if (!item) throw notFound(kind.one);
        await recordAudit(tx, { studioId, ...by, action: `${kind.audit}.deleted`, about: item.name });
        await tell(tx, studioId, id);
      }),

    restore: (studioId: string, id: string): Promise<I> =>
      db.transaction(async (tx) => {
        const item = await binGear(tx, kind, studioId, id, false);
        if (!item) throw notFound(kind.one);
        await tell(tx, studioId, id);
        return item;
      }),
  };
}

/** A change may name a part; only the whole tells whether a keep-out still lies on the bed. */
function checked<I extends GearItem>(kind: GearKind<I>, fields: FieldsOf<I>): FieldsOf<I> {
  const result = kind.fields.safeParse(fields);
  if (result.success) return result.data;
  const errors = result.error.issues.map((issue) => ({ path: issue.path.join('.'), message: issue.message }));
  throw invalid(errors[0].message, errors);
}
