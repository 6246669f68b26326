/** Labels in dies: the table of all pairs, the recommended dies, and the place of a label's stamps. */
import type { Knex } from 'knex';
import type { Batch, FitTable } from '../../contract/batches.ts';
import { borderAt } from '../../engine/fit/border-at.ts';
import { bestFit } from '../../engine/fit/index.ts';
import type { Fit } from '../../engine/fit/types.ts';
import { recommendedDie } from '../../engine/fit/verdict.ts';
import type { Outline, Point } from '../../engine/geometry/types.ts';
import { invalid } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import { allDies, findDie } from '../dies/dies.queries.ts';
import type { DieRow } from '../dies/dies.queries.ts';
import type { SentimentForPlan } from '../stamp-sets/stamp-sets.queries.ts';
import { findSettings } from '../studio/studio.queries.ts';
import { sentimentsOf } from './batch-parts.ts';
import { touchContent } from './batches.queries.ts';
import { requiredBatch, wholeBatch } from './batches.service.ts';
import { compose } from './line-fit.ts';
import { linesOfBatch, updateLine } from './lines.queries.ts';
import type { LineChange, WholeLine } from './lines.queries.ts';

type PlaceColumns = Required<Pick<LineChange, 'placed_by' | 'centre_x_mm' | 'centre_y_mm' | 'rotation_deg' | 'fit_border_mm' | 'fit_bound_mm' | 'fit_verdict'>>;
const NO_PLACE: PlaceColumns = { placed_by: null, centre_x_mm: null, centre_y_mm: null, rotation_deg: null, fit_border_mm: null, fit_bound_mm: null, fit_verdict: null };

function placed(fit: Fit): PlaceColumns {
  return {
    placed_by: 'fit', centre_x_mm: fit.centre.x, centre_y_mm: fit.centre.y, rotation_deg: fit.rotationDeg, fit_border_mm: fit.borderMm, fit_bound_mm: fit.boundMm, fit_verdict: fit.verdict,
  };
}

/** All stamps of the line as one artwork; null while a size is missing. */
export function artworkOf(line: WholeLine, sentiments: ReadonlyMap<string, SentimentForPlan>): Outline | null {
  const artworks = line.pieces.map((piece) => sentiments.get(piece.sentiment_id)?.artwork ?? null).filter((artwork) => artwork !== null);
  if (artworks.length === 0 || artworks.length < line.pieces.length) return null;
  return compose(artworks, { arrangement: line.arrangement, align: line.align, pieceGapMm: line.piece_gap_mm }).artwork;
}

/** Best place in the line's die, or how good the given one is. */
export async function placeLine(tx: Knex, studioId: string, line: WholeLine, byHand: { centre: Point; rotationDeg: number } | null): Promise<PlaceColumns> {
  if (line.die_id === null) return NO_PLACE;
  const die = await findDie(tx, studioId, line.die_id);
  if (!die) throw invalid('This die is not here. It may have been deleted.', [{ path: 'dieId', message: 'Choose another die.' }]);
  const artwork = artworkOf(line, await sentimentsOf(tx, studioId, [line]));
  if (!artwork) return NO_PLACE;
  const limits = await findSettings(tx, studioId);
  const best = bestFit(artwork, die.geometry, limits);
  if (!byHand) return placed(best);
  const { borderMm, verdict } = borderAt(artwork, die.geometry, byHand.centre, byHand.rotationDeg, limits);
  return {
    placed_by: 'hand', centre_x_mm: byHand.centre.x, centre_y_mm: byHand.centre.y, rotation_deg: byHand.rotationDeg, fit_border_mm: borderMm,
    // The bound is for the turns that the fit tries; a tilt by hand may do better.
    fit_bound_mm: Math.max(best.boundMm, borderMm), fit_verdict: verdict,
  };
}

export function createFitService({ db, engine, events }: Deps) {
  async function table(studioId: string, batchId: string): Promise<{ lines: WholeLine[]; dies: (DieRow & { set_name: string })[]; rows: { line: WholeLine; artwork: Outline | null; fits: Fit[]; recommended: number | null }[] }> {
    await requiredBatch(db, studioId, batchId);
    const lines = await linesOfBatch(db, studioId, batchId);
    const sentiments = await sentimentsOf(db, studioId, lines);
    const dies = await allDies(db, studioId);
    const { goodMm, snugMm } = await findSettings(db, studioId);
    const artworks = lines.map((line) => artworkOf(line, sentiments));
    const known = artworks.filter((artwork) => artwork !== null);
    const fits = known.length === 0 || dies.length === 0 ? [] : await engine.run<Fit[][]>('fitTable', { artworks: known, dies: dies.map((die) => die.geometry), options: { goodMm, snugMm } });
    // A die that is not owned is shown, but not recommended.
    const areas = dies.map((die) => die.area_mm2);
    let next = 0;
    const rows = lines.map((line, i) => {
      const row = artworks[i] === null ? [] : (fits[next++] ?? []);
      const owned = row.map((fit, d) => (dies[d].owned > 0 ? fit : { ...fit, fits: false, verdict: 'no' as const }));
      return { line, artwork: artworks[i], fits: row, recommended: recommendedDie(owned, areas) };
    });
    return { lines, dies, rows };
  }

  return {
    async fitTable(studioId: string, batchId: string): Promise<FitTable> {
      const { dies, rows } = await table(studioId, batchId);
      return {
        dies: dies.map((die) => ({ id: die.id, name: die.name, dieSetName: die.set_name, geometry: die.geometry, widthMm: die.width_mm, heightMm: die.height_mm, areaMm2: die.area_mm2, owned: die.owned })),
        rows: rows.map(({ line, artwork, fits, recommended }) => ({ lineId: line.id, artwork, fits, recommendedDieId: recommended === null ? null : dies[recommended].id })),
      };
    },

    async takeRecommended(studioId: string, batchId: string, onlyMissing: boolean): Promise<Batch> {
      const { dies, rows } = await table(studioId, batchId);
      return db.transaction(async (tx) => {
        for (const { line, fits, recommended } of rows) {
          if (line.cut !== 'die' || recommended === null || (onlyMissing && line.die_id !== null && line.placed_by !== null)) continue;
          // Someone may have changed the line while the table was made: then its version is another, and hers stays.
          await updateLine(tx, studioId, line.id, line.version, { die_id: dies[recommended].id, ...placed(fits[recommended]) });
        }
        await touchContent(tx, studioId, batchId);
        await events.publish(tx, studioId, { type: 'changed', noun: 'batches', id: batchId });
        return wholeBatch(tx, await requiredBatch(tx, studioId, batchId));
      });
    },
  };
}
