/** Sign-ins: a cookie that says nothing by itself, and a row in `sessions`. The session is written at sign-in and never after. */
import connectPgSimple from 'connect-pg-simple';
import type { Request, RequestHandler } from 'express';
import session from 'express-session';
import type pg from 'pg';
import { v4 } from 'uuid';
import type { Config } from '../config.ts';
import { AppError } from '../errors/app-error.ts';

const DAY_MS = 86_400_000;
/** A session unused for so long is over. */
const IDLE_MS = 14 * DAY_MS;
/** However busy, a person signs in again after so long. */
export const ABSOLUTE_MS = 60 * DAY_MS;

declare module 'express-session' {
  interface SessionData {
    personId: string;
    /** Names the session in lists; the real id is known to the cookie alone. */
    publicId: string;
    startedAt: number;
    device: string;
  }
}

export function createSession(config: Config, pool: pg.Pool, onError: (error: Error) => void): RequestHandler {
  const Store = connectPgSimple(session);
  const secure = config.publicUrl?.startsWith('https:') ?? false;
  return session({
    store: new Store({ pool, tableName: 'sessions', pruneSessionInterval: 3600, errorLog: (...args: unknown[]) => onError(new Error(args.map(String).join(' '))) }),
    secret: config.sessionSecret,
    // The prefix makes browsers refuse the cookie over http or from another host.
    name: secure ? '__Host-inkmuster' : 'inkmuster',
    cookie: { httpOnly: true, sameSite: 'lax', secure, path: '/', maxAge: IDLE_MS },
    proxy: config.trustProxy > 0,
    resave: false,
    saveUninitialized: false,
  });
}

/** Under a new id, and kept before anybody is told: an old or planted id is worth nothing afterwards. */
export async function startSession(req: Request, personId: string): Promise<void> {
  await settled((done) => req.session.regenerate(done));
  Object.assign(req.session, { personId, publicId: v4(), startedAt: Date.now(), device: (req.get('user-agent') ?? '').slice(0, 300) });
  await settled((done) => req.session.save(done));
}

/** The row is gone before the answer goes out; nothing writes it again. */
export async function endSession(req: Request): Promise<void> {
  await settled((done) => req.session.destroy(done));
}

function settled(act: (done: (error: unknown) => void) => void): Promise<void> {
  return new Promise((resolve, reject) => {
    act((error) => (error ? reject(new AppError(503, 'sign-in-away', 'Signing in and out is not possible just now. Try again in a moment.', { cause: error, retryAfterSeconds: 5 })) : resolve()));
  });
}
