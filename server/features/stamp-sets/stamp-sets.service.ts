/** What can be done with a stamp set and its sentiments. Pictures have a service of their own. */
import type { Knex } from 'knex';
import type { z } from 'zod';
import type { BodyOf, QueryOf } from '../../contract/route.ts';
import type { Sentiment, SentimentQuery, StampSet, StampSetCard, stampSetRoutes } from '../../contract/stamp-sets.ts';
import { newId } from '../../db/database.ts';
import type { PageOf } from '../../db/paging.ts';
import type { Outline } from '../../engine/geometry/types.ts';
import { AppError, conflict, invalid, notFound, stale } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import type { UploadedFile } from '../../middleware/mount.ts';
import { recordAudit } from '../account/audit.queries.ts';
import { findSettings } from '../studio/studio.queries.ts';
import { picturesOfSet, toPicture } from './pictures.queries.ts';
import type { PictureService } from './pictures.service.ts';
import { sentimentDrawing } from './sentiment-drawing.ts';
import { setUpright, typedOutline } from './sentiment-follow.ts';
import { findSentiment, insertTypedSentiment, listSentiments, sentimentsOfSet, setSentimentDeleted, toSentiment, updateSentiment } from './sentiments.queries.ts';
import type { OutlinedRow, SentimentChange } from './sentiments.queries.ts';
import { findStampSet, insertStampSet, listStampSets, setStampSetDeleted, stampSetFields, touchStampSet, updateStampSet } from './stamp-sets.queries.ts';
import type { StampSetRow } from './stamp-sets.queries.ts';

type Routes = typeof stampSetRoutes;
type NewSet = BodyOf<Routes['POST /studios/:studioId/stamp-sets']>;
type SetChange = BodyOf<Routes['PATCH /studios/:studioId/stamp-sets/:id']>;
type NewSentiment = BodyOf<Routes['POST /studios/:studioId/stamp-sets/:id/sentiments']>;
type SentimentEdit = BodyOf<Routes['PATCH /studios/:studioId/sentiments/:id']>;
export interface Actor { id: string; address: string }

export function createStampSetService({ db, events }: Deps, pictures: PictureService) {
  const changed = (tx: Knex, studioId: string, id: string) => events.publish(tx, studioId, { type: 'changed', noun: 'stamp-sets', id });

  async function whole(tx: Knex, row: StampSetRow): Promise<StampSet> {
    return {
      ...stampSetFields(row),
      pictures: (await picturesOfSet(tx, row.studio_id, row.id)).map(toPicture),
      sentiments: (await sentimentsOfSet(tx, row.studio_id, row.id)).map(toSentiment),
    };
  }

  async function find(studioId: string, id: string): Promise<StampSet> {
    const row = await findStampSet(db, studioId, id);
    if (!row) throw notFound('This stamp set');
    return whole(db, row);
  }

  const newRow = (studioId: string, body: NewSet) => ({ id: newId(), studio_id: studioId, name: body.name, mount: body.mount, storage_place: body.storagePlace, note: body.note });

  return {
    find,

    list: (studioId: string, query: QueryOf<Routes['GET /studios/:studioId/stamp-sets']>): Promise<PageOf<StampSetCard>> => listStampSets(db, studioId, query),

    async create(studioId: string, body: NewSet): Promise<StampSet> {
      return db.transaction(async (tx) => {
        const row = await insertStampSet(tx, newRow(studioId, body));
        await changed(tx, studioId, row.id);
        return whole(tx, row);
      });
    },

    /** Set and picture together, so that a refused file leaves no empty set behind. */
    async createFromPicture(studioId: string, body: NewSet & { mirrored: boolean }, file: UploadedFile, by: Actor): Promise<StampSet> {
      const stored = await pictures.store(file);
      return db.transaction(async (tx) => {
        const row = await insertStampSet(tx, newRow(studioId, body));
        await pictures.addStored(tx, { studioId, stampSetId: row.id }, stored, body.mirrored, by);
        await changed(tx, studioId, row.id);
        return whole(tx, row);
      });
    },

    async change(studioId: string, id: string, { version, storagePlace, ...rest }: SetChange): Promise<StampSet> {
      const row = await updateStampSet(db, studioId, id, version, { ...rest, ...(storagePlace === undefined ? {} : { storage_place: storagePlace }) });
      if (!row) throw stale('This stamp set', await find(studioId, id));
      await changed(db, studioId, id);
      return whole(db, row);
    },

    async remove(studioId: string, id: string, by: Actor): Promise<void> {
      await db.transaction(async (tx) => {
        const row = await setStampSetDeleted(tx, studioId, id, true);
        if (!row) throw notFound('This stamp set');
        await recordAudit(tx, { studioId, personId: by.id, action: 'stamp-set.deleted', about: id, details: { name: row.name }, address: by.address });
        await changed(tx, studioId, id);
      });
    },

    async restore(studioId: string, id: string): Promise<StampSet> {
      return db.transaction(async (tx) => {
        const row = await setStampSetDeleted(tx, studioId, id, false);
        if (!row) throw notFound('This stamp set');
        await changed(tx, studioId, id);
        return whole(tx, row);
      });
    },

    async sentiments(studioId: string, query: z.output<typeof SentimentQuery>) {
      const found = await listSentiments(db, studioId, query);
      return { ...found, items: found.items.map((row) => ({ ...toSentiment(row), stampSetName: row.set_name, mount: row.mount })) };
    },

    async sentiment(studioId: string, id: string): Promise<Sentiment & { artwork: Outline | null }> {
      const row = await findSentiment(db, studioId, id);
      if (!row) throw notFound('This sentiment');
      return { ...toSentiment(row), artwork: row.artwork };
    },

    async drawing(studioId: string, id: string): Promise<string> {
      const row = await findSentiment(db, studioId, id);
      if (!row) throw notFound('This sentiment');
      if (!row.artwork) throw new AppError(404, 'no-scale', 'This sentiment has no outline yet: its picture has no scale.');
      return sentimentDrawing(row.artwork, row.outlined);
    },

    async addTyped(studioId: string, stampSetId: string, body: NewSentiment): Promise<Sentiment> {
      return db.transaction(async (tx) => {
        if (!(await findStampSet(tx, studioId, stampSetId))) throw notFound('This stamp set');
        const { trimMm } = await findSettings(tx, studioId);
        const row = await insertTypedSentiment(tx, {
          id: newId(), studio_id: studioId, stamp_set_id: stampSetId, name: body.name, words: body.words, tags: body.tags, owned: body.owned, trim_mm: trimMm,
          width_mm: body.widthMm, height_mm: body.heightMm, artwork: typedOutline(body.widthMm, body.heightMm),
        });
        await touchStampSet(tx, studioId, stampSetId);
        await changed(tx, studioId, stampSetId);
        return toSentiment(row);
      });
    },

    async changeSentiment(studioId: string, id: string, edit: SentimentEdit): Promise<Sentiment> {
      const answer = await db.transaction(async (tx) => {
        const known = await findSentiment(tx, studioId, id);
        if (!known) throw notFound('This sentiment');
        const row = await updateSentiment(tx, studioId, id, edit.version, sentimentChange(known, edit));
        if (!row) return null;
        await touchStampSet(tx, studioId, row.stamp_set_id);
        await changed(tx, studioId, row.stamp_set_id);
        return toSentiment(row);
      });
      if (answer) return answer;
      const now = await findSentiment(db, studioId, id);
      throw now ? stale('This sentiment', toSentiment(now)) : notFound('This sentiment');
    },

    async removeSentiment(studioId: string, id: string): Promise<void> {
      await db.transaction(async (tx) => {
        const known = await findSentiment(tx, studioId, id);
        if (!known) throw notFound('This sentiment');
        if (known.reading_id !== null) throw conflict('of-a-picture', 'This sentiment is part of a picture. Set it aside there instead.');
        await setSentimentDeleted(tx, studioId, id, true);
        await touchStampSet(tx, studioId, known.stamp_set_id);
        await changed(tx, studioId, known.stamp_set_id);
      });
    },

    async restoreSentiment(studioId: string, id: string): Promise<Sentiment> {
      return db.transaction(async (tx) => {
        const row = await setSentimentDeleted(tx, studioId, id, false);
        if (!row) throw notFound('This sentiment');
        await changed(tx, studioId, row.stamp_set_id);
        return toSentiment(row);
      });
    },
  };
}

/** What the person wrote herself is hers from then on: no recognition changes it. */
function sentimentChange(known: OutlinedRow, edit: SentimentEdit): SentimentChange {
  const change: SentimentChange = {
    ...(edit.name === undefined ? {} : { name: edit.name }),
    ...(edit.words === undefined ? {} : { words: edit.words, words_by: 'person' as const }),
    ...(edit.tags === undefined ? {} : { tags: edit.tags, tags_by: 'person' as const }),
    ...(edit.owned === undefined ? {} : { owned: edit.owned }),
    ...(edit.trimMm === undefined ? {} : { trim_mm: edit.trimMm }),
  };
  if (edit.uprightDeg !== undefined) {
    const before = known.upright_deg ?? known.angle_deg, after = edit.uprightDeg ?? known.angle_deg;
    const turned = known.artwork ? setUpright(known.artwork, before - after) : null;
    Object.assign(change, { upright_deg: edit.uprightDeg }, turned && { width_mm: turned.widthMm, height_mm: turned.heightMm, artwork: turned.artwork });
  }
  if (edit.widthMm !== undefined || edit.heightMm !== undefined) {
    if (known.reading_id !== null) throw invalid('The size of this sentiment comes from its picture. Give the picture another scale to change it.', [{ path: 'widthMm', message: 'Measured in the picture.' }]);
    const widthMm = edit.widthMm ?? known.width_mm!, heightMm = edit.heightMm ?? known.height_mm!;
    Object.assign(change, { width_mm: widthMm, height_mm: heightMm, artwork: typedOutline(widthMm, heightMm) });
  }
  return change;
}
