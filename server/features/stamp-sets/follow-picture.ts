/** Writes a picture's sentiments as its reading gives them, in the transaction that changed the picture. */
import type { Knex } from 'knex';
import { newId } from '../../db/database.ts';
import { boxOverlap } from '../../engine/geometry/box-match.ts';
import { findSettings } from '../studio/studio.queries.ts';
import type { PictureRow } from './pictures.queries.ts';
import { followReading } from './sentiment-follow.ts';
import type { FollowedSentiment, GroupedSentiments, Wishes } from './sentiment-follow.ts';
import { knownSentiments, saveReadSentiments } from './sentiments.queries.ts';
import type { OutlinedRow, ReadSentimentRow } from './sentiments.queries.ts';

export const wishesOf = (row: Pick<PictureRow, 'scale' | 'grouping_gap' | 'corrections'>): Wishes => ({ scale: row.scale, groupingGap: row.grouping_gap, corrections: row.corrections });

/** `picture` as changed and locked; `grouped` its reading under the wishes that now stand in it. */
export async function followPicture(tx: Knex, picture: PictureRow, grouped: GroupedSentiments): Promise<void> {
  const known = await knownSentiments(tx, picture.studio_id, picture.id);
  const followed = followReading(grouped, known.map((row) => ({ id: row.id, place: row.place, present: row.present, uprightDeg: row.upright_deg })));
  const byId = new Map(known.map((row) => [row.id, row]));
  const rows = followed.map((sentiment) => toRow(picture, sentiment)).filter((row) => differs(row, byId.get(row.id)));

  const given = new Set(followed.map(({ id }) => id));
  const gone = known.filter((row) => row.present && !given.has(row.id)).map((row): ReadSentimentRow => ({ ...readPartOf(row), present: false }));
  const { trimMm } = await findSettings(tx, picture.studio_id);
  await saveReadSentiments(tx, [...rows, ...gone], trimMm);
}

function toRow(picture: PictureRow, s: FollowedSentiment): ReadSentimentRow {
  return {
    id: s.id ?? newId(), studio_id: picture.studio_id, stamp_set_id: picture.stamp_set_id, reading_id: picture.id,
    place: s.place, present: s.present, number: s.number, width_mm: s.widthMm, height_mm: s.heightMm, artwork: s.artwork,
    angle_deg: s.angleDeg, ink_area_mm2: s.inkAreaMm2, thinnest_stroke_mm: s.thinnestStrokeMm, set_aside: s.setAside,
  };
}

function readPartOf(row: OutlinedRow): ReadSentimentRow {
  const { id, studio_id, stamp_set_id, reading_id, place, present, number, width_mm, height_mm, artwork, angle_deg, ink_area_mm2, thinnest_stroke_mm, set_aside } = row;
  return { id, studio_id, stamp_set_id, reading_id, place, present, number, width_mm, height_mm, artwork, angle_deg, ink_area_mm2, thinnest_stroke_mm, set_aside };
}

/** Most changes concern one sentiment of many; the others need no writing. */
function differs(row: ReadSentimentRow, known: OutlinedRow | undefined): boolean {
  if (!known || !known.place) return true;
  const before = readPartOf(known);
  return (Object.keys(row) as (keyof ReadSentimentRow)[]).some((key) => {
    if (key === 'place') return boxOverlap(row.place!, before.place!) !== 1;
    return key === 'artwork' ? JSON.stringify(row.artwork) !== JSON.stringify(before.artwork) : row[key] !== before[key];
  });
}
