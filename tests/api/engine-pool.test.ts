import { performance } from 'node:perf_hooks';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createEnginePool } from '../../server/jobs/engine-pool.ts';
import type { ClosablePool } from '../../server/jobs/engine-pool.ts';

/** Takes minutes: 2^18 rounds. */
const ENDLESS = { digest: 'x', cost: 18 };
let pool: ClosablePool;
beforeAll(() => {
  pool = createEnginePool(1);
});
afterAll(() => pool.close());

const works = async () => expect(await pool.run('bcryptCompare', { digest: 'a', hash: await pool.run('bcryptHash', { digest: 'a', cost: 4 }) })).toBe(true);

describe('worker threads', () => {
  it('answer', works);

  it('are replaced after an unforeseen error, which comes back with its words', async () => {
    await expect(pool.run('bcryptHash', { digest: 7, cost: 4 })).rejects.toThrow(/Illegal arguments/);
    await expect(pool.run('no such task', {})).rejects.toThrow(/No task is called/);
    await works();
  });

  it('are ended by the parent when the time is up, and others take their place', async () => {
    const started = performance.now();
    await expect(pool.run('bcryptHash', ENDLESS, { timeLimitMs: 1500 })).rejects.toMatchObject({ code: 'took-too-long' });
    expect(performance.now() - started).toBeLessThan(4000);
    await works();
  });

  it('are ended 2 s after a stop that the task does not hear', async () => {
    const controller = new AbortController();
    const running = pool.run('bcryptHash', ENDLESS, { signal: controller.signal });
    setTimeout(() => controller.abort('cancelled'), 200);
    await expect(running).rejects.toBeDefined();
    await works();
  });

  it('do not begin what was stopped beforehand', async () => {
    await expect(pool.run('bcryptHash', ENDLESS, { signal: AbortSignal.abort('cancelled') })).rejects.toBe('cancelled');
  });

  it('keep code and words of the engine’s own refusals', async () => {
    await expect(pool.run('readStampSheet', { file: new Uint8Array([1, 2, 3]), options: {} })).rejects.toMatchObject({ name: 'AppError', status: 422, code: expect.stringMatching(/^[a-z-]+$/) });
  });
});
