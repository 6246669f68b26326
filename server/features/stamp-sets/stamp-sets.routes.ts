import type { Request } from 'express';
import { stampSetRoutes } from '../../contract/stamp-sets.ts';
import { feature } from '../../feature.ts';
import type { Deps, Feature } from '../../feature.ts';
import type { JobDefinition } from '../../jobs/types.ts';
import { FileAnswer } from '../../middleware/mount.ts';
import { createPictureService } from './pictures.service.ts';
import type { PicturePlace } from './pictures.service.ts';
import { readPictureJob, recogniseWordsJob } from './stamp-sets.jobs.ts';
import { createStampSetService } from './stamp-sets.service.ts';

/** An image's address changes with the image. */
const YEAR_SECONDS = 365 * 86_400;

export function createStampSets(deps: Deps): Feature {
  const pictures = createPictureService(deps);
  const sets = createStampSetService(deps, pictures);
  const actor = ({ person, req }: { person: { id: string }; req: Request }) => ({ id: person.id, address: req.ip ?? 'unknown' });
  const place = (params: { studioId: string; id: string; pictureId: string }): PicturePlace => ({ studioId: params.studioId, stampSetId: params.id, pictureId: params.pictureId });

  return feature({
    table: stampSetRoutes,
    jobs: [readPictureJob(deps), recogniseWordsJob(deps)] as JobDefinition[],
    handlers: {
      'GET /studios/:studioId/stamp-sets': ({ params, query }) => sets.list(params.studioId, query),
      'POST /studios/:studioId/stamp-sets': ({ params, body }) => sets.create(params.studioId, body),
      'POST /studios/:studioId/stamp-sets/from-picture': (call) => sets.createFromPicture(call.params.studioId, call.body, call.files[0], actor(call)),
      'GET /studios/:studioId/stamp-sets/:id': ({ params }) => sets.find(params.studioId, params.id),
      'PATCH /studios/:studioId/stamp-sets/:id': ({ params, body }) => sets.change(params.studioId, params.id, body),
      'DELETE /studios/:studioId/stamp-sets/:id': (call) => sets.remove(call.params.studioId, call.params.id, actor(call)),
      'POST /studios/:studioId/stamp-sets/:id/restore': ({ params }) => sets.restore(params.studioId, params.id),

      'POST /studios/:studioId/stamp-sets/:id/pictures': (call) => pictures.add({ studioId: call.params.studioId, stampSetId: call.params.id }, call.files[0], call.body.mirrored, call.person),
      'PUT /studios/:studioId/stamp-sets/:id/pictures/:pictureId': (call) => pictures.replace(place(call.params), call.body.version, call.files[0], call.person),
      'DELETE /studios/:studioId/stamp-sets/:id/pictures/:pictureId': async ({ params }) => {
        await pictures.setDeleted(place(params), true);
      },
      'POST /studios/:studioId/stamp-sets/:id/pictures/:pictureId/restore': ({ params }) => pictures.setDeleted(place(params), false),
      'GET /studios/:studioId/stamp-sets/:id/pictures/:pictureId/image': async ({ params, query }) =>
        new FileAnswer(await pictures.image(place(params), query.size), 'image/jpeg', { maxAgeSeconds: query.key ? YEAR_SECONDS : 0 }),
      'GET /studios/:studioId/stamp-sets/:id/pictures/:pictureId/reading': ({ params }) => pictures.reading(place(params)),
      'PUT /studios/:studioId/stamp-sets/:id/pictures/:pictureId/corrections': ({ params, body }) => pictures.correct(place(params), body),
      'POST /studios/:studioId/stamp-sets/:id/pictures/:pictureId/read': (call) => pictures.readAgain(place(call.params), call.body, call.person),
      'POST /studios/:studioId/stamp-sets/:id/pictures/:pictureId/words': (call) => pictures.recogniseWords(place(call.params), call.person),

      'GET /studios/:studioId/sentiments': ({ params, query }) => sets.sentiments(params.studioId, query),
      'GET /studios/:studioId/sentiments/:id': ({ params }) => sets.sentiment(params.studioId, params.id),
      'GET /studios/:studioId/sentiments/:id/drawing': async ({ params, query }) =>
        new FileAnswer(new TextEncoder().encode(await sets.drawing(params.studioId, params.id)), 'image/svg+xml', { maxAgeSeconds: query.key ? YEAR_SECONDS : 0 }),
      'POST /studios/:studioId/stamp-sets/:id/sentiments': ({ params, body }) => sets.addTyped(params.studioId, params.id, body),
      'PATCH /studios/:studioId/sentiments/:id': ({ params, body }) => sets.changeSentiment(params.studioId, params.id, body),
      'DELETE /studios/:studioId/sentiments/:id': ({ params }) => sets.removeSentiment(params.studioId, params.id),
      'POST /studios/:studioId/sentiments/:id/restore': ({ params }) => sets.restoreSentiment(params.studioId, params.id),
    },
  });
}
