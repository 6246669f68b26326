/** One line a request: what, how long, for whom. No query strings, bodies or cookies: they may hold secrets. */
import { randomUUID } from 'node:crypto';
import type { RequestHandler } from 'express';
import type { Logger } from 'pino';

declare module 'express-serve-static-core' {
  interface Request {
    log?: Logger;
  }
}

/** Tokens stand in these paths. */
const SECRET_PATH = /(\/(?:invitations|shared)\/)[^/]+/;

export function requestLog(log: Logger): RequestHandler {
  return (req, res, next) => {
    const started = performance.now();
    res.locals.requestId = randomUUID();
    req.log = log;
    const path = req.originalUrl.split('?')[0].replace(SECRET_PATH, '$1…');
    res.once('close', () => {
      const level = path.startsWith('/api/health') ? 'debug' : 'info';
      log[level]({ requestId: res.locals.requestId, method: req.method, path, status: res.statusCode, ms: Math.round(performance.now() - started), personId: req.session?.personId, aborted: !res.writableFinished || undefined }, 'request');
    });
    next();
  };
}
