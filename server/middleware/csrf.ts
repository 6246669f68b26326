/**
 * Changes come from our own pages only: the Origin must be ours, and a signed-in person's change carries a token that no other
 * site can read. Together with the cookie's SameSite these are three fences one behind the other.
 */
import { createHmac, timingSafeEqual } from 'node:crypto';
import type { Request, RequestHandler } from 'express';
import type { Config } from '../config.ts';
import { AppError } from '../errors/app-error.ts';

const READING = new Set(['GET', 'HEAD', 'OPTIONS']);

/** Tied to the session's id, so it needs no place of its own and ends with the session. */
export function csrfToken(config: Config, sessionId: string): string {
  return createHmac('sha256', config.sessionSecret).update(`form-token:${sessionId}`).digest('base64url');
}

export function csrf(config: Config): RequestHandler {
  return (req, _res, next) => {
    if (READING.has(req.method)) return next();
    if (!fromOurPages(config, req)) return next(new AppError(403, 'foreign-origin', 'This change was sent from another site and was not made.'));
    if (req.session?.personId && !same(req.get('x-csrf-token') ?? '', csrfToken(config, req.sessionID))) {
      return next(new AppError(403, 'form-token', 'This page is from an earlier sign-in. Reload it and try again; nothing was changed.'));
    }
    next();
  };
}

/** Browsers name the origin of every change; programs that are no browser send no cookie by themselves and may leave it out. */
function fromOurPages(config: Config, req: Request): boolean {
  if (req.get('sec-fetch-site') === 'cross-site') return false;
  const origin = req.get('origin');
  if (origin === undefined) return true;
  return origin === config.publicUrl || origin === `${req.protocol}://${req.get('host')}`;
}

function same(a: string, b: string): boolean {
  const [left, right] = [Buffer.from(a), Buffer.from(b)];
  return left.length === right.length && timingSafeEqual(left, right);
}
