/** What can be done with die sets and their dies. */
import type { Knex } from 'knex';
import type { Die, DieSet, dieRoutes } from '../../contract/dies.ts';
import type { BodyOf, QueryOf } from '../../contract/route.ts';
import { newId } from '../../db/database.ts';
import { dieAreaMm2, dieOutline } from '../../engine/fit/die-outline.ts';
import type { DieGeometry } from '../../engine/fit/types.ts';
import { outlineBox } from '../../engine/geometry/ring.ts';
import { conflict, notFound, stale } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import { recordAudit } from '../account/audit.queries.ts';
import { sentimentsToFit } from '../stamp-sets/sentiments.queries.ts';
import { findSettings } from '../studio/studio.queries.ts';
import {
  allDies, diesOfSets, findDie, findDieSet, insertDies, insertDieSet, listDieSets, setDieDeleted, setDieSetDeleted, toDie, toDieSet, touchDieSet, updateDie, updateDieSet,
} from './dies.queries.ts';
import type { DieRow, DieSetRow, NewDieRow } from './dies.queries.ts';

type Routes = typeof dieRoutes;
type NewSet = BodyOf<Routes['POST /studios/:studioId/die-sets']>;
type SetChange = BodyOf<Routes['PATCH /studios/:studioId/die-sets/:id']>;
type DieEdit = BodyOf<Routes['PATCH /studios/:studioId/dies/:id']>;
type NewDie = NewSet['dies'][number];
interface Actor { id: string; address: string }

const MOST_DIES_IN_A_SET = 60;

export function createDieService({ db, events }: Deps) {
  const changed = (tx: Knex, studioId: string, id: string) => events.publish(tx, studioId, { type: 'changed', noun: 'die-sets', id });

  async function whole(tx: Knex, row: DieSetRow): Promise<DieSet> {
    return toDieSet(row, await diesOfSets(tx, row.studio_id, [row.id]));
  }

  async function findRow(tx: Knex, studioId: string, id: string): Promise<DieSetRow> {
    const row = await findDieSet(tx, studioId, id);
    if (!row) throw notFound('This die set');
    return row;
  }

  /** Ends every change of one die: its set moves up, and open pages ask again. */
  async function settled(tx: Knex, row: DieRow): Promise<Die> {
    await touchDieSet(tx, row.studio_id, row.die_set_id);
    await changed(tx, row.studio_id, row.die_set_id);
    return toDie(row);
  }

  return {
    list: (studioId: string, query: QueryOf<Routes['GET /studios/:studioId/die-sets']>) => listDieSets(db, studioId, query),

    async find(studioId: string, id: string): Promise<DieSet> {
      return whole(db, await findRow(db, studioId, id));
    },

    async dies(studioId: string) {
      return { items: (await allDies(db, studioId)).map((row) => ({ ...toDie(row), dieSetName: row.set_name })) };
    },

    async fitTable(studioId: string, { stampSet, dieSet }: QueryOf<Routes['GET /studios/:studioId/fit-table']>) {
      const [sentiments, dies, { goodMm, snugMm }] = await Promise.all([sentimentsToFit(db, studioId, stampSet ?? null), allDies(db, studioId), findSettings(db, studioId)]);
      const chosen = dies.filter((row) => dieSet === undefined || row.die_set_id === dieSet);
      return { sentiments, dies: chosen.map((row) => ({ ...toDie(row), dieSetName: row.set_name })), goodMm, snugMm };
    },

    async create(studioId: string, body: NewSet): Promise<DieSet> {
      return db.transaction(async (tx) => {
        const row = await insertDieSet(tx, { id: newId(), studio_id: studioId, name: body.name, note: body.note });
        await insertDies(tx, body.dies.map((die) => newDieRow(row, die)));
        await changed(tx, studioId, row.id);
        return whole(tx, row);
      });
    },

    async change(studioId: string, id: string, { version, ...change }: SetChange): Promise<DieSet> {
      return db.transaction(async (tx) => {
        const row = await updateDieSet(tx, studioId, id, version, change);
        if (!row) throw stale('This die set', await whole(tx, await findRow(tx, studioId, id)));
        await changed(tx, studioId, id);
        return whole(tx, row);
      });
    },

    async remove(studioId: string, id: string, by: Actor): Promise<void> {
      await db.transaction(async (tx) => {
        const row = await setDieSetDeleted(tx, studioId, id, true);
        if (!row) throw notFound('This die set');
        await recordAudit(tx, { studioId, personId: by.id, action: 'die-set.deleted', about: id, details: { name: row.name }, address: by.address });
        await changed(tx, studioId, id);
      });
    },

    async restore(studioId: string, id: string): Promise<DieSet> {
      return db.transaction(async (tx) => {
        const row = await setDieSetDeleted(tx, studioId, id, false);
        if (!row) throw notFound('This die set');
        await changed(tx, studioId, id);
        return whole(tx, row);
      });
    },

    async addDies(studioId: string, id: string, dies: readonly NewDie[]): Promise<DieSet> {
      return db.transaction(async (tx) => {
        const row = await findRow(tx, studioId, id);
        const known = await diesOfSets(tx, studioId, [id]);
        if (known.length + dies.length > MOST_DIES_IN_A_SET) throw conflict('set-full', `A die set holds at most ${MOST_DIES_IN_A_SET} dies; this one has ${known.length}.`);
        await insertDies(tx, dies.map((die) => newDieRow(row, die)));
        await touchDieSet(tx, studioId, id);
        await changed(tx, studioId, id);
        return whole(tx, row);
      });
    },

    async changeDie(studioId: string, id: string, { version, geometry, ...rest }: DieEdit): Promise<Die> {
      return db.transaction(async (tx) => {
        const known = await findDie(tx, studioId, id);
        if (!known) throw notFound('This die');
        const row = await updateDie(tx, studioId, id, version, { ...rest, ...(geometry ? measure(geometry) : {}) });
        if (!row) throw stale('This die', toDie(known));
        return settled(tx, row);
      });
    },

    async removeDie(studioId: string, id: string, by: Actor): Promise<void> {
      await db.transaction(async (tx) => {
        const row = await setDieDeleted(tx, studioId, id, true);
        if (!row) throw notFound('This die');
        await recordAudit(tx, { studioId, personId: by.id, action: 'die.deleted', about: id, details: { name: row.name }, address: by.address });
        await settled(tx, row);
      });
    },

    async restoreDie(studioId: string, id: string): Promise<Die> {
      return db.transaction(async (tx) => {
        const row = await setDieDeleted(tx, studioId, id, false);
        if (!row) throw notFound('This die');
        return settled(tx, row);
      });
    },
  };
}

function newDieRow(set: DieSetRow, die: NewDie): NewDieRow {
  return { id: newId(), studio_id: set.studio_id, die_set_id: set.id, name: die.name, owned: die.owned, ...measure(die.geometry) };
}

function measure(geometry: DieGeometry) {
  const { w, h } = outlineBox(dieOutline(geometry));
  return { geometry, width_mm: w, height_mm: h, area_mm2: dieAreaMm2(geometry) };
}
