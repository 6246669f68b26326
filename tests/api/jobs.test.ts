import { setTimeout as sleep } from 'node:timers/promises';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { invalid } from '../../server/errors/app-error.ts';
import type { Queue } from '../../server/jobs/queue.ts';
import type { JobContext, JobDefinition } from '../../server/jobs/types.ts';
import { openKit } from './kit.ts';
import type { Agent, Kit } from './kit.ts';

/** What the jobs of this file do next, by the word in their payload. */
const scripts = new Map<string, (context: JobContext, attempt: number) => Promise<unknown>>();
const attempts = new Map<string, number>();
const saved: string[] = [];
const failed: { word: string; code: string }[] = [];

const scripted: JobDefinition<{ word: string }, unknown> = {
  kind: 'scripted',
  payload: z.object({ word: z.string() }),
  timeLimitMs: 1500,
  async run({ word }, context) {
    attempts.set(word, (attempts.get(word) ?? 0) + 1);
    return scripts.get(word)!(context, attempts.get(word)!);
  },
  async save(_tx, { word }, output) {
    saved.push(word);
    return { output };
  },
  async onFailed(_tx, { word }, error) {
    failed.push({ word, code: error.code });
  },
};

let kit: Kit;
let maker: Agent;
beforeAll(async () => {
  kit = await openKit({ jobs: true });
  (kit.deps.jobs as Queue).define([scripted as JobDefinition]);
  maker = await kit.signIn('maker');
});
afterAll(() => kit.close());

async function enqueue(word: string, script: (context: JobContext, attempt: number) => Promise<unknown>, singletonKey?: string): Promise<string> {
  scripts.set(word, script);
  return kit.deps.jobs.enqueue(kit.db, { kind: 'scripted' }, { word }, { studioId: kit.studioId, subjectId: null, personId: maker.person.id, singletonKey });
}

describe('a job', () => {
  it('runs within a second, and its result is what was saved', async () => {
    const started = Date.now();
    const ended = await kit.jobEnded(maker, await enqueue('plain', async () => 42));
    expect(Date.now() - started).toBeLessThan(1000);
    expect(ended).toMatchObject({ state: 'done', progress: 1, result: { output: 42 }, error: null });
    expect(saved.filter((w) => w === 'plain')).toHaveLength(1);
  });

  it('does not exist where the transaction that asked for it was rolled back', async () => {
    scripts.set('rolled back', async () => 1);
    await expect(
      kit.db.transaction(async (tx) => {
        await kit.deps.jobs.enqueue(tx, { kind: 'scripted' }, { word: 'rolled back' }, { studioId: kit.studioId, subjectId: null, personId: maker.person.id });
        throw new Error('changed my mind');
      }),
    ).rejects.toThrow('changed my mind');
    await sleep(600);
    expect(attempts.has('rolled back')).toBe(false);
  });

  it('is tried twice more after a fault, and succeeds where it can', async () => {
    const ended = await kit.jobEnded(maker, await enqueue('third time', async (_context, attempt) => {
      if (attempt < 3) throw new Error('not yet');
      return 'at last';
    }));
    expect(ended).toMatchObject({ state: 'done', result: { output: 'at last' } });
    expect(attempts.get('third time')).toBe(3);
  });

  it('gives up after three faults, in words, and tells its owner once', async () => {
    const ended = await kit.jobEnded(maker, await enqueue('never', async () => {
      throw new Error('secret inside');
    }));
    expect(ended).toMatchObject({ state: 'failed', error: { code: 'given-up', message: expect.stringContaining('three times') } });
    expect(JSON.stringify(ended)).not.toContain('secret inside');
    expect(attempts.get('never')).toBe(3);
    expect(failed.filter((f) => f.word === 'never')).toEqual([{ word: 'never', code: 'given-up' }]);
  });

  it('is not tried again where the input was refused', async () => {
    const ended = await kit.jobEnded(maker, await enqueue('refused', async () => {
      throw invalid('There is no ink in this picture.');
    }));
    expect(ended).toMatchObject({ state: 'failed', error: { code: 'invalid', message: 'There is no ink in this picture.' } });
    expect(attempts.get('refused')).toBe(1);
  });

  it('that takes too long is broken off and tried again', async () => {
    const ended = await kit.jobEnded(maker, await enqueue('slow once', (_context, attempt) => (attempt === 1 ? sleep(60_000, 0, { ref: false }) : Promise.resolve('quick'))));
    expect(ended).toMatchObject({ state: 'done', result: { output: 'quick' } });
  });

  it('stops at a person’s word, tells its owner, and saves nothing', async () => {
    const id = await enqueue('stopped', ({ signal }) => sleep(60_000, 'late', { signal }));
    await expect.poll(async () => (await maker.get(`/studios/:studioId/jobs/${id}`)).body.state).toBe('running');
    const { body } = await maker.post(`/studios/:studioId/jobs/${id}/cancel`).expect(200);
    expect(body).toMatchObject({ state: 'cancelled', error: { code: 'cancelled' } });
    await sleep(300);
    expect(saved).not.toContain('stopped');
    expect(failed).toContainEqual({ word: 'stopped', code: 'cancelled' });
    expect((await maker.get(`/studios/:studioId/jobs/${id}`)).body.state).toBe('cancelled');
  });

  it('with the same key as one that is waiting or running is that one', async () => {
    let release = () => {};
    const gate = new Promise<void>((resolve) => (release = resolve));
    const first = await enqueue('keyed', () => gate, 'only one');
    const second = await enqueue('keyed', () => gate, 'only one');
    expect(second).toBe(first);
    release();
    await kit.jobEnded(maker, first);
    expect(await enqueue('keyed', async () => 0, 'only one')).not.toBe(first);
  });

  it('is shown among the studio’s work while it runs, with its progress, and to no other studio', async () => {
    let release = () => {};
    const gate = new Promise<void>((resolve) => (release = resolve));
    const id = await enqueue('seen', async ({ onProgress }) => {
      onProgress(0.25, 'sorting parts');
      await gate;
    });
    await expect.poll(async () => (await maker.get('/studios/:studioId/jobs')).body.items.find((j: { id: string }) => j.id === id)).toMatchObject({ state: 'running', progress: 0.25, stage: 'sorting parts' });
    const elsewhere = await kit.makeStudio(await kit.makePerson());
    const stranger = await kit.signIn('owner', elsewhere);
    await stranger.get(`/studios/:studioId/jobs/${id}`).expect(404);
    release();
    await kit.jobEnded(maker, id);
  });

  it('whose worker lost its lock is done again, and written once', async () => {
    const id = await enqueue('lost', async (_context, attempt) => {
      if (attempt === 1) await sleep(900);
      return attempt;
    });
    await expect.poll(() => attempts.get('lost')).toBe(1);
    // The sweep's own step, as if the worker's connection had gone: the row goes back, a second attempt begins.
    await kit.db('jobs').where({ id }).update({ state: 'queued' });
    await (kit.deps.jobs as Queue).dispatch(kit.db, id);
    await sleep(1200);
    await kit.db('jobs').where({ id, state: 'queued' }).update({ updated_at: kit.db.raw(`now() - interval '1 minute'`) });
    const ended = await kit.jobEnded(maker, id);
    expect(ended.result).toEqual({ output: 2 });
    expect(saved.filter((w) => w === 'lost')).toHaveLength(1);
  });
});

describe('news', () => {
  it('of a job and of changes reach the pages of the studio, after the commit, and no others', async () => {
    const elsewhere = await kit.makeStudio(await kit.makePerson());
    const stranger = await kit.signIn('owner', elsewhere);
    const [ours, theirs] = [await listen(maker), await listen(stranger)];
    const id = await enqueue('told', async ({ onProgress }) => onProgress(0.5, 'half way'));
    await kit.jobEnded(maker, id);
    await kit.db.transaction(async (tx) => {
      await kit.deps.events.publish(tx, kit.studioId, { type: 'changed', noun: 'dies', id });
      await sleep(200);
      expect(ours.text()).not.toContain('"noun":"dies"');
    });
    await expect.poll(ours.text).toContain('"noun":"dies"');
    const states = [...ours.text().matchAll(/"state":"(\w+)"/g)].map((m) => m[1]);
    expect(states[0]).toBe('queued');
    expect(states).toContain('running');
    expect(states.at(-1)).toBe('done');
    expect(theirs.text()).not.toContain('"type"');
    ours.close();
    theirs.close();
  });
});

describe('news across servers', () => {
  it('reaches pages that another server process keeps open', async () => {
    const second = await openKit({ databaseUrl: kit.databaseUrl });
    const page = await listen(maker, second.url);
    await kit.deps.events.publish(kit.db, kit.studioId, { type: 'changed', noun: 'batches', id: kit.studioId });
    await expect.poll(page.text).toContain('"noun":"batches"');
    page.close();
    await second.close();
  });
});

async function listen(agent: Agent, url = kit.url): Promise<{ text: () => string; close: () => void }> {
  const controller = new AbortController();
  const answer = await fetch(`${url}/api/events?studioId=${agent.studioId}`, { headers: { Cookie: agent.cookie }, signal: controller.signal });
  expect(answer.headers.get('content-type')).toMatch(/^text\/event-stream/);
  expect(answer.headers.get('content-encoding')).toBeNull();
  let text = '';
  void (async () => {
    const decoder = new TextDecoder();
    for await (const chunk of answer.body as unknown as AsyncIterable<Uint8Array>) text += decoder.decode(chunk, { stream: true });
  })().catch(() => undefined);
  return { text: () => text, close: () => controller.abort() };
}
