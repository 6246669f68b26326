/** One person's open page: writes a studio's news to it as server-sent events until the page goes. */
import type { Request, Response } from 'express';
import type { Events } from './types.ts';

/** Keeps proxies from closing a quiet stream. */
const HEARTBEAT_MS = 20_000;
/** A removed member's stream must not live on; the page opens a new one at once, past the role check. */
const LIFETIME_MS = 15 * 60_000;
/** A page that does not read is dropped before it fills our memory. */
const MAX_UNSENT_BYTES = 1024 * 1024;

export function streamEvents(events: Events, studioId: string, req: Request, res: Response): void {
  res.status(200).set({ 'Content-Type': 'text/event-stream', 'Cache-Control': 'no-store, no-transform', 'X-Accel-Buffering': 'no' });
  res.flushHeaders();
  res.write('retry: 2000\n\nevent: open\ndata: {}\n\n');
  const unsubscribe = events.subscribe(
    studioId,
    (event) => {
      res.write(`event: ${event.type}\ndata: ${JSON.stringify(event)}\n\n`);
      if (res.writableLength > MAX_UNSENT_BYTES) res.destroy();
    },
    // The page comes back, and with its `open` it asks for everything again.
    () => res.end(),
  );
  const heartbeat = setInterval(() => res.write(': still here\n\n'), HEARTBEAT_MS);
  const end = setTimeout(() => res.end(), LIFETIME_MS);
  res.once('close', () => {
    unsubscribe();
    clearInterval(heartbeat);
    clearTimeout(end);
  });
  req.once('error', () => res.destroy());
}
