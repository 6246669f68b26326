/** Everything that a batch names, read at once: what planning and fitting start from. */
import type { Knex } from 'knex';
import { conflict } from '../../errors/app-error.ts';
import { diesByIds } from '../dies/dies.queries.ts';
import { gearByIds } from '../gear/gear.queries.ts';
import { cardstocks, inks, platforms } from '../gear/gear-kinds.ts';
import { sentimentsByIds } from '../stamp-sets/stamp-sets.queries.ts';
import type { SentimentForPlan } from '../stamp-sets/stamp-sets.queries.ts';
import { findSettings } from '../studio/studio.queries.ts';
import type { BatchRow } from './batches.queries.ts';
import { linesOfBatch } from './lines.queries.ts';
import type { WholeLine } from './lines.queries.ts';
import type { OrderParts } from './run-order.ts';

const byId = <T extends { id: string }>(items: readonly T[]): Map<string, T> => new Map(items.map((item) => [item.id, item]));
const distinct = (ids: readonly (string | null)[]): string[] => [...new Set(ids.filter((id) => id !== null))];

export async function sentimentsOf(db: Knex, studioId: string, lines: readonly WholeLine[]): Promise<Map<string, SentimentForPlan>> {
  return byId(await sentimentsByIds(db, studioId, distinct(lines.flatMap((line) => line.pieces.map((piece) => piece.sentiment_id)))));
}

export async function orderParts(db: Knex, batch: BatchRow): Promise<OrderParts> {
  const studioId = batch.studio_id;
  if (batch.platform_id === null) throw conflict('no-platform', 'Choose a stamping platform first.');
  const lines = await linesOfBatch(db, studioId, batch.id);
  const [platform] = await gearByIds(db, platforms, studioId, [batch.platform_id]);
  return {
    batch, lines, platform,
    settings: await findSettings(db, studioId),
    sentiments: await sentimentsOf(db, studioId, lines),
    dies: byId(await diesByIds(db, studioId, distinct(lines.map((line) => line.die_id)))),
    inks: byId(await gearByIds(db, inks, studioId, distinct(lines.flatMap((line) => line.pieces.map((piece) => piece.ink_id))))),
    cardstocks: byId(await gearByIds(db, cardstocks, studioId, distinct(lines.map((line) => line.cardstock_id)))),
  };
}
