import type { Picture, Scale, Sentiment, StampSet, StampSetCard } from '../../server/contract/stamp-sets.ts';
import { addressOf, call } from './http.ts';
import type { Answer, Body, Query } from './http.ts';

export type { Picture, Scale, Sentiment, StampSet, StampSetCard };
export type Mount = StampSet['mount'];
export type StampSetList = Answer<'GET /studios/:studioId/stamp-sets'>;
type PictureOf = Pick<Picture, 'id' | 'stampSetId'>;
type Sending = { onProgress?: (share: number) => void; signal?: AbortSignal };

const IMAGE = '/studios/:studioId/stamp-sets/:id/pictures/:pictureId/image';
const DRAWING = '/studios/:studioId/sentiments/:id/drawing';
const sent = (file: File, { onProgress, signal }: Sending) => ({ upload: { field: 'picture' as const, files: [file], onProgress }, signal });
const placed = (studioId: string, picture: PictureOf) => ({ studioId, id: picture.stampSetId, pictureId: picture.id });

export const listStampSets = (studioId: string, query: Query<'GET /studios/:studioId/stamp-sets'>) => call('GET /studios/:studioId/stamp-sets', { params: { studioId }, query });
export const readStampSet = (studioId: string, id: string) => call('GET /studios/:studioId/stamp-sets/:id', { params: { studioId, id } });
export const addStampSet = (studioId: string, body: Body<'POST /studios/:studioId/stamp-sets'>) => call('POST /studios/:studioId/stamp-sets', { params: { studioId }, body });
export const addStampSetFromPicture = (studioId: string, body: Body<'POST /studios/:studioId/stamp-sets/from-picture'>, file: File, sending: Sending = {}) =>
  call('POST /studios/:studioId/stamp-sets/from-picture', { params: { studioId }, body, ...sent(file, sending) });
export const changeStampSet = (studioId: string, id: string, body: Body<'PATCH /studios/:studioId/stamp-sets/:id'>) => call('PATCH /studios/:studioId/stamp-sets/:id', { params: { studioId, id }, body });
export const deleteStampSet = (studioId: string, id: string) => call('DELETE /studios/:studioId/stamp-sets/:id', { params: { studioId, id } });
export const restoreStampSet = (studioId: string, id: string) => call('POST /studios/:studioId/stamp-sets/:id/restore', { params: { studioId, id } });

export const addPicture = (studioId: string, stampSetId: string, file: File, mirrored: boolean, sending: Sending = {}) =>
  call('POST /studios/:studioId/stamp-sets/:id/pictures', { params: { studioId, id: stampSetId }, body: { mirrored: mirrored ? 'true' : 'false' }, ...sent(file, sending) });
export const replacePicture = (studioId: string, picture: Picture, file: File, sending: Sending = {}) =>
  call('PUT /studios/:studioId/stamp-sets/:id/pictures/:pictureId', { params: placed(studioId, picture), body: { version: picture.version }, ...sent(file, sending) });
export const deletePicture = (studioId: string, picture: PictureOf) => call('DELETE /studios/:studioId/stamp-sets/:id/pictures/:pictureId', { params: placed(studioId, picture) });
export const restorePicture = (studioId: string, picture: PictureOf) => call('POST /studios/:studioId/stamp-sets/:id/pictures/:pictureId/restore', { params: placed(studioId, picture) });
export const readReading = (studioId: string, picture: PictureOf) => call('GET /studios/:studioId/stamp-sets/:id/pictures/:pictureId/reading', { params: placed(studioId, picture) });
export const saveCorrections = (studioId: string, picture: PictureOf, body: Body<'PUT /studios/:studioId/stamp-sets/:id/pictures/:pictureId/corrections'>) =>
  call('PUT /studios/:studioId/stamp-sets/:id/pictures/:pictureId/corrections', { params: placed(studioId, picture), body });
export const readAgain = (studioId: string, picture: Picture, mirrored?: boolean) =>
  call('POST /studios/:studioId/stamp-sets/:id/pictures/:pictureId/read', { params: placed(studioId, picture), body: { version: picture.version, ...(mirrored === undefined ? {} : { mirrored }) } });
export const recogniseWords = (studioId: string, picture: PictureOf) => call('POST /studios/:studioId/stamp-sets/:id/pictures/:pictureId/words', { params: placed(studioId, picture) });

export const listSentiments = (studioId: string, query: Query<'GET /studios/:studioId/sentiments'>) => call('GET /studios/:studioId/sentiments', { params: { studioId }, query });
export const addTypedSentiment = (studioId: string, stampSetId: string, body: Body<'POST /studios/:studioId/stamp-sets/:id/sentiments'>) =>
  call('POST /studios/:studioId/stamp-sets/:id/sentiments', { params: { studioId, id: stampSetId }, body });
export type SentimentEdit = Omit<Body<'PATCH /studios/:studioId/sentiments/:id'>, 'version'>;
export const changeSentiment = (studioId: string, id: string, version: number, edit: SentimentEdit) => call('PATCH /studios/:studioId/sentiments/:id', { params: { studioId, id }, body: { ...edit, version } });
export const deleteSentiment = (studioId: string, id: string) => call('DELETE /studios/:studioId/sentiments/:id', { params: { studioId, id } });
export const restoreSentiment = (studioId: string, id: string) => call('POST /studios/:studioId/sentiments/:id/restore', { params: { studioId, id } });

/** Addresses of pictures; null until there is something to show. */
export function imageAddress(studioId: string, picture: PictureOf & { imageKey: string | null }, size: 'view' | 'small'): string | null {
  return picture.imageKey === null ? null : addressOf(IMAGE, placed(studioId, picture), { size, key: picture.imageKey });
}
export const cardImageAddress = (studioId: string, card: StampSetCard): string | null =>
  card.pictureId === null ? null : imageAddress(studioId, { id: card.pictureId, stampSetId: card.id, imageKey: card.imageKey }, 'small');
export function drawingAddress(studioId: string, sentiment: Pick<Sentiment, 'id' | 'widthMm' | 'updatedAt'>): string | null {
  return sentiment.widthMm === null ? null : addressOf(DRAWING, { studioId, id: sentiment.id }, { key: sentiment.updatedAt });
}
