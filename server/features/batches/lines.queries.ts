/** Rows of `batch_lines` and `batch_line_pieces`. */
import type { Knex } from 'knex';
import type { BatchLine, Piece } from '../../contract/batches.ts';
import type { SentimentForPlan } from '../stamp-sets/stamp-sets.queries.ts';

export interface LineRow {
  id: string; studio_id: string; batch_id: string; position: number; arrangement: BatchLine['arrangement']; align: BatchLine['align']; piece_gap_mm: number; cut: BatchLine['cut'];
  die_id: string | null; border_mm: number; placed_by: 'fit' | 'hand' | null; centre_x_mm: number | null; centre_y_mm: number | null; rotation_deg: number | null;
  fit_border_mm: number | null; fit_bound_mm: number | null; fit_verdict: 'roomy' | 'good' | 'snug' | 'tight' | 'no' | null;
  quantity: number; overs: number; cardstock_id: string | null; may_turn: boolean; version: number;
}
export interface PieceRow { line_id: string; position: number; sentiment_id: string; ink_id: string | null }
/** A line with its stamps in their order. */
export interface WholeLine extends LineRow { pieces: PieceRow[] }

const COLUMNS = [
  'id', 'studio_id', 'batch_id', 'position', 'arrangement', 'align', 'piece_gap_mm', 'cut', 'die_id', 'border_mm', 'placed_by', 'centre_x_mm', 'centre_y_mm', 'rotation_deg',
  'fit_border_mm', 'fit_bound_mm', 'fit_verdict', 'quantity', 'overs', 'cardstock_id', 'may_turn', 'version',
];
export type LineChange = Partial<Omit<LineRow, 'id' | 'studio_id' | 'batch_id' | 'version'>>;

export async function linesOfBatch(db: Knex, studioId: string, batchId: string): Promise<WholeLine[]> {
  const rows = await db('batch_lines').where({ studio_id: studioId, batch_id: batchId }).orderBy(['position', 'id']).select<LineRow[]>(COLUMNS);
  const pieces = await db('batch_line_pieces').where({ studio_id: studioId }).whereIn('line_id', rows.map(({ id }) => id)).orderBy(['line_id', 'position'])
    .select<PieceRow[]>('line_id', 'position', 'sentiment_id', 'ink_id');
  return rows.map((row) => ({ ...row, pieces: pieces.filter((piece) => piece.line_id === row.id) }));
}

export async function insertLines(tx: Knex, lines: readonly (Partial<LineRow> & Pick<LineRow, 'id' | 'studio_id' | 'batch_id' | 'position' | 'quantity'> & { pieces: Omit<PieceRow, 'line_id' | 'position'>[] })[]): Promise<void> {
  if (lines.length === 0) return;
  await tx('batch_lines').insert(lines.map(({ pieces: _pieces, ...row }) => row));
  await tx('batch_line_pieces').insert(lines.flatMap((line) => line.pieces.map((piece, position) => ({ studio_id: line.studio_id, line_id: line.id, position, ...piece }))));
}

/** Undefined where the version is not the current one. */
export async function updateLine(tx: Knex, studioId: string, id: string, version: number | null, change: LineChange): Promise<LineRow | undefined> {
  const [row] = await tx('batch_lines').where({ studio_id: studioId, id, ...(version === null ? {} : { version }) })
    .update({ ...change, version: tx.raw('version + 1') }).returning<LineRow[]>(COLUMNS);
  return row;
}

export async function replacePieces(tx: Knex, studioId: string, lineId: string, pieces: readonly Omit<PieceRow, 'line_id' | 'position'>[]): Promise<void> {
  await tx('batch_line_pieces').where({ studio_id: studioId, line_id: lineId }).delete();
  await tx('batch_line_pieces').insert(pieces.map((piece, position) => ({ studio_id: studioId, line_id: lineId, position, ...piece })));
}

export async function deleteLines(tx: Knex, studioId: string, batchId: string, ids: readonly string[]): Promise<number> {
  return tx('batch_lines').where({ studio_id: studioId, batch_id: batchId }).whereIn('id', [...ids]).delete();
}

/** Of every line of the batch, or of their stamps. */
export async function updateAllLines(tx: Knex, studioId: string, batchId: string, change: Pick<LineChange, 'overs' | 'cardstock_id' | 'may_turn'>, inkId: string | null | undefined): Promise<void> {
  const lines = () => tx('batch_lines').where({ studio_id: studioId, batch_id: batchId });
  await lines().update({ ...change, version: tx.raw('version + 1') });
  if (inkId !== undefined) await tx('batch_line_pieces').where({ studio_id: studioId }).whereIn('line_id', lines().select('id')).update({ ink_id: inkId });
}

export function toLine(row: WholeLine, sentiments: ReadonlyMap<string, SentimentForPlan>): BatchLine {
  const pieces = row.pieces.flatMap((piece) => toPiece(piece, sentiments.get(piece.sentiment_id)));
  return {
    id: row.id, position: row.position, title: pieces.map(({ title }) => title).join(' + '), pieces, arrangement: row.arrangement, align: row.align, pieceGapMm: row.piece_gap_mm,
    cut: row.cut, dieId: row.die_id, borderMm: row.border_mm,
    place: row.placed_by === null ? null : {
      centre: { x: row.centre_x_mm!, y: row.centre_y_mm! }, rotationDeg: row.rotation_deg!, borderMm: row.fit_border_mm!, boundMm: row.fit_bound_mm!, verdict: row.fit_verdict!, byHand: row.placed_by === 'hand',
    },
    quantity: row.quantity, overs: row.overs, cardstockId: row.cardstock_id, mayTurn: row.may_turn, version: row.version,
  };
}

function toPiece(piece: PieceRow, sentiment: SentimentForPlan | undefined): Piece[] {
  if (!sentiment) return [];
  return [{
    sentimentId: sentiment.id, inkId: piece.ink_id, title: sentiment.name, stampSetId: sentiment.stampSetId, mount: sentiment.mount, widthMm: sentiment.widthMm, heightMm: sentiment.heightMm,
    owned: sentiment.owned, gone: sentiment.deleted || sentiment.setAside, version: sentiment.version,
  }];
}
