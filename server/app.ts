/** The Express application: headers, session, the API from the features' tables, and the built client. */
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import compression from 'compression';
import express from 'express';
import type { Express, RequestHandler } from 'express';
import helmet from 'helmet';
import type { Application } from './assemble.ts';
import type { Config } from './config.ts';
import { serverRoutes } from './contract/jobs.ts';
import { openApi } from './contract/openapi.ts';
import type { RouteTable } from './contract/route.ts';
import { AppError } from './errors/app-error.ts';
import { nothingHere, problemAnswers } from './errors/problems.ts';
import { feature } from './feature.ts';
import type { Feature } from './feature.ts';
import { createAccess } from './middleware/access.ts';
import { csrf } from './middleware/csrf.ts';
import { createCostlyLimit } from './middleware/limits.ts';
import { requestLog } from './middleware/request-log.ts';
import { createSession } from './middleware/session.ts';
import { upload } from './middleware/uploads.ts';

const API_VERSION = '1';
const JSON_LIMIT = '2mb';

export function createApp({ deps, features, pool }: Pick<Application, 'deps' | 'features' | 'pool'>): Express {
  const { config, db, log } = deps;
  const app = express();
  app.set('trust proxy', config.trustProxy);
  app.disable('x-powered-by');
  app.use(requestLog(log));
  app.use(securityHeaders(config));

  const api = express.Router();
  const server = serverFeature(deps, () => Object.assign({}, ...[...features, server].map((f) => f.table)) as RouteTable);
  const steps = { access: createAccess(db), limit: createCostlyLimit(db), upload };
  // Whether the process lives must not depend on the session store.
  server.mount(api, steps);
  api.use(express.json({ limit: JSON_LIMIT, strict: true }));
  api.use(createSession(config, pool, (error) => log.warn({ err: error }, 'session store')));
  api.use(csrf(config));
  features.forEach((noun) => noun.mount(api, steps));
  api.use(nothingHere);
  app.use('/api', api);

  // Pages only: answers of the API hold the form token beside words from outside, and events must flow at once.
  app.use(compression(), client(config.clientFolder));
  app.use(problemAnswers(log));
  return app;
}

function securityHeaders(config: Config): RequestHandler {
  const secure = config.publicUrl?.startsWith('https:') ?? false;
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'"],
        // Naive UI writes its styles into the page at run time.
        styleSrc: ["'self'", "'unsafe-inline'"],
        imgSrc: ["'self'", 'data:', 'blob:'],
        fontSrc: ["'self'"],
        connectSrc: ["'self'"],
        workerSrc: ["'self'", 'blob:'],
        objectSrc: ["'none'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
        ...(secure ? { upgradeInsecureRequests: [] } : {}),
      },
    },
    strictTransportSecurity: secure ? { maxAge: 31_536_000, includeSubDomains: false } : false,
    referrerPolicy: { policy: 'same-origin' },
  });
}

function serverFeature({ db }: Application['deps'], table: () => RouteTable): Feature {
  return feature({
    table: serverRoutes,
    handlers: {
      'GET /health/live': () => ({ status: 'live' as const }),
      'GET /health/ready': async () => {
        await db.raw('SELECT 1').catch((cause: unknown) => {
          throw new AppError(503, 'database-away', 'The database does not answer.', { cause, retryAfterSeconds: 5 });
        });
        return { status: 'ready' as const };
      },
      'GET /openapi.json': () => openApi(table(), API_VERSION),
    },
  });
}

/** Built files carry their content's hash in their names and never change; pages are all the same file. */
function client(folder: string): RequestHandler {
  const router = express.Router();
  router.use('/assets', express.static(join(folder, 'assets'), { immutable: true, maxAge: '1y', index: false }), nothingHere);
  router.use(express.static(folder, { index: false, maxAge: '1h' }));
  router.get('/{*page}', (_req, res, next) => {
    const page = join(folder, 'index.html');
    if (!existsSync(page)) return next(new AppError(503, 'no-client', 'The pages have not been built yet. Run npm run build.'));
    res.set('Cache-Control', 'no-cache').sendFile(page);
  });
  return router;
}
