/** The labels of a batch: which stamps, in which die, how many, and where in the label. */
import type { Knex } from 'knex';
import { MAX_LINES } from '../../contract/batches.ts';
import type { Batch, batchRoutes } from '../../contract/batches.ts';
import type { BodyOf } from '../../contract/route.ts';
import { newId } from '../../db/database.ts';
import { conflict, invalid, notFound, stale } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import { gearByIds } from '../gear/gear.queries.ts';
import { cardstocks, inks } from '../gear/gear-kinds.ts';
import { sentimentsByIds } from '../stamp-sets/stamp-sets.queries.ts';
import { lockBatch, touchContent } from './batches.queries.ts';
import type { BatchRow } from './batches.queries.ts';
import { requiredBatch, wholeBatch } from './batches.service.ts';
import { placeLine } from './fit.service.ts';
import { deleteLines, insertLines, linesOfBatch, replacePieces, updateAllLines, updateLine } from './lines.queries.ts';
import type { LineChange, WholeLine } from './lines.queries.ts';

type Routes = typeof batchRoutes;
type LineEdit = BodyOf<Routes['PATCH /studios/:studioId/batches/:id/lines/:lineId']>;

export function createLineService({ db, events }: Deps) {
  /** All changes of lines go through here: the batch held, its plans out of date, the pages told. */
  const changeBatch = (studioId: string, id: string, work: (tx: Knex.Transaction, batch: BatchRow, lines: WholeLine[]) => Promise<void>): Promise<Batch> =>
    db.transaction(async (tx) => {
      const batch = await lockBatch(tx, studioId, id);
      if (!batch) throw notFound('This batch');
      await work(tx, batch, await linesOfBatch(tx, studioId, id));
      await touchContent(tx, studioId, id);
      await events.publish(tx, studioId, { type: 'changed', noun: 'batches', id });
      return wholeBatch(tx, await requiredBatch(tx, studioId, id));
    });

  async function checkSentiments(tx: Knex, studioId: string, ids: readonly string[]): Promise<void> {
    const known = await sentimentsByIds(tx, studioId, [...new Set(ids)]);
    const usable = new Set(known.filter(({ deleted, setAside }) => !deleted && !setAside).map(({ id }) => id));
    if (ids.some((id) => !usable.has(id))) throw invalid('One of the stamps is not here. It may have been deleted.');
  }

  async function checkGear(tx: Knex, studioId: string, inkIds: readonly (string | null | undefined)[], cardstockId: string | null | undefined): Promise<void> {
    const wanted = [...new Set(inkIds.filter((id): id is string => Boolean(id)))];
    if ((await gearByIds(tx, inks, studioId, wanted)).length < wanted.length) throw invalid('This ink is not here.');
    if (cardstockId && (await gearByIds(tx, cardstocks, studioId, [cardstockId])).length === 0) throw invalid('This cardstock is not here.');
  }

  return {
    add: (studioId: string, id: string, body: BodyOf<Routes['POST /studios/:studioId/batches/:id/lines']>) =>
      changeBatch(studioId, id, async (tx, batch, lines) => {
        if (lines.length + body.lines.length > MAX_LINES) throw conflict('too-many-lines', `A batch holds at most ${MAX_LINES} labels. Make a second batch for the rest.`);
        await checkSentiments(tx, studioId, body.lines.flatMap((line) => line.sentimentIds));
        const first = (lines.at(-1)?.position ?? -1) + 1;
        // What the labels so far have in common is likely to hold for the new ones.
        const like = lines.at(-1);
        await insertLines(tx, body.lines.map((line, i) => ({
          id: newId(), studio_id: studioId, batch_id: batch.id, position: first + i, quantity: line.quantity ?? 1, overs: like?.overs ?? 0, cardstock_id: like?.cardstock_id ?? null,
          pieces: line.sentimentIds.map((sentiment_id) => ({ sentiment_id, ink_id: like?.pieces[0]?.ink_id ?? null })),
        })));
      }),

    change: (studioId: string, id: string, lineId: string, edit: LineEdit) =>
      changeBatch(studioId, id, async (tx, batch, lines) => {
        const line = lines.find((other) => other.id === lineId);
        if (!line) throw notFound('This label');
        if (line.version !== edit.version) throw stale('This label', await wholeBatch(tx, batch));
        if (edit.pieces) await checkSentiments(tx, studioId, edit.pieces.map(({ sentimentId }) => sentimentId).filter((wanted) => !line.pieces.some((piece) => piece.sentiment_id === wanted)));
        await checkGear(tx, studioId, edit.pieces?.map(({ inkId }) => inkId) ?? [], edit.cardstockId);
        const pieces = edit.pieces?.map(({ sentimentId, inkId }) => ({ sentiment_id: sentimentId, ink_id: inkId }));
        if (pieces) await replacePieces(tx, studioId, lineId, pieces);
        const next: WholeLine = { ...line, ...columns(edit), ...(pieces ? { pieces: pieces.map((piece, position) => ({ ...piece, position, line_id: lineId })) } : {}) };
        const place = needsPlace(line, next, edit) ? await placeLine(tx, studioId, next, edit.place === 'fit' ? null : edit.place ?? null) : {};
        await updateLine(tx, studioId, lineId, edit.version, { ...columns(edit), ...place });
      }),

    remove: (studioId: string, id: string, lineId: string) =>
      changeBatch(studioId, id, async (tx) => {
        if ((await deleteLines(tx, studioId, id, [lineId])) === 0) throw notFound('This label');
      }),

    /** Those that do not come out even go to the first labels. */
    spread: (studioId: string, id: string) =>
      changeBatch(studioId, id, async (tx, batch, lines) => {
        const cards = batch.designs * batch.people + batch.spares;
        for (const [i, line] of lines.entries()) {
          const quantity = Math.floor(cards / lines.length) + (i < cards % lines.length ? 1 : 0);
          if (quantity !== line.quantity) await updateLine(tx, studioId, line.id, null, { quantity });
        }
      }),

    forAll: (studioId: string, id: string, body: BodyOf<Routes['POST /studios/:studioId/batches/:id/for-all']>) =>
      changeBatch(studioId, id, async (tx) => {
        await checkGear(tx, studioId, [body.inkId], body.cardstockId);
        const { overs, cardstockId, mayTurn } = body;
        await updateAllLines(tx, studioId, id, { ...(overs === undefined ? {} : { overs }), ...(cardstockId === undefined ? {} : { cardstock_id: cardstockId }), ...(mayTurn === undefined ? {} : { may_turn: mayTurn }) }, body.inkId);
      }),

    /** The first of them takes the others' stamps; quantities are its own. */
    combine: (studioId: string, id: string, body: BodyOf<Routes['POST /studios/:studioId/batches/:id/combine']>) =>
      changeBatch(studioId, id, async (tx, _batch, lines) => {
        const chosen = lines.filter((line) => body.lineIds.includes(line.id));
        if (chosen.length !== new Set(body.lineIds).size) throw notFound('One of these labels');
        const [kept, ...joined] = chosen;
        const pieces = chosen.flatMap((line) => line.pieces.map(({ sentiment_id, ink_id }) => ({ sentiment_id, ink_id })));
        await deleteLines(tx, studioId, id, joined.map((line) => line.id));
        await replacePieces(tx, studioId, kept.id, pieces);
        const next: WholeLine = { ...kept, arrangement: body.arrangement, pieces: pieces.map((piece, position) => ({ ...piece, position, line_id: kept.id })) };
        await updateLine(tx, studioId, kept.id, null, { arrangement: body.arrangement, ...(await placeLine(tx, studioId, next, null)) });
      }),
  };
}

function columns(edit: LineEdit): LineChange {
  const named: Record<string, unknown> = {
    quantity: edit.quantity, overs: edit.overs, cardstock_id: edit.cardstockId, may_turn: edit.mayTurn, cut: edit.cut, border_mm: edit.borderMm, arrangement: edit.arrangement, align: edit.align,
    piece_gap_mm: edit.pieceGapMm, die_id: edit.dieId,
  };
  return Object.fromEntries(Object.entries(named).filter(([, value]) => value !== undefined)) as LineChange;
}

/** Another die, another arrangement or other stamps: the old place says nothing any more. */
function needsPlace(before: WholeLine, after: WholeLine, edit: LineEdit): boolean {
  const stamps = (line: WholeLine) => line.pieces.map((piece) => piece.sentiment_id).join();
  const keys = ['die_id', 'arrangement', 'align', 'piece_gap_mm'] as const;
  return edit.place !== undefined || keys.some((key) => before[key] !== after[key]) || stamps(before) !== stamps(after);
}
