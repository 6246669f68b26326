import type { Request } from 'express';
import { templateRoutes } from '../../contract/templates.ts';
import { feature } from '../../feature.ts';
import type { Deps, Feature } from '../../feature.ts';
import { FileAnswer } from '../../middleware/mount.ts';
import { createTemplateService } from './templates.service.ts';

export function createTemplates(deps: Deps): Feature {
  const templates = createTemplateService(deps);
  /** Where the bench is reached: as configured, else as this request came in. */
  const origin = (req: Request) => deps.config.publicUrl ?? `${req.protocol}://${req.get('host') ?? 'localhost'}`;

  return feature({
    table: templateRoutes,
    handlers: {
      'GET /studios/:studioId/batches/:id/plans/:planId/templates.pdf': async ({ params, query, req }) => {
        const { bytes, name } = await templates.pdf(params, query, origin(req));
        return new FileAnswer(bytes, 'application/pdf', { fileName: name });
      },
      'GET /studios/:studioId/batches/:id/plans/:planId/template-pages': ({ params, query, req }) => templates.pages(params, query, origin(req)),
      'GET /studios/:studioId/batches/:id/plans/:planId/cut-lines.svg': async ({ params, query }) => {
        const { svg, name } = await templates.cutLines(params, query.run, query.sheet);
        return new FileAnswer(new TextEncoder().encode(svg), 'image/svg+xml', { fileName: name });
      },
      'POST /studios/:studioId/batches/:id/plans/:planId/printed': ({ params }) => templates.printed(params),
    },
  });
}
