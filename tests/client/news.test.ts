import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { listenToStudio } from '../../src/api/events.ts';
import type { Job } from '../../src/api/jobs.ts';
import { useJob } from '../../src/composables/useJob.ts';
import { useStudio } from '../../src/stores/studio.ts';
import { useStudioNews } from '../../src/stores/studio-news.ts';
import { inComponent, settle } from './mount.ts';

/** What the browser's own does, driven by hand. */
class FakeSource extends EventTarget {
  static readonly CLOSED = 2;
  static opened: FakeSource[] = [];
  readyState = 1;
  readonly url: string;
  constructor(url: string) {
    super();
    this.url = url;
    FakeSource.opened.push(this);
  }
  close(): void {
    this.readyState = FakeSource.CLOSED;
  }
  say(type: string, data: unknown): void {
    this.dispatchEvent(new MessageEvent(type, { data: JSON.stringify(data) }));
  }
}
const source = () => FakeSource.opened.at(-1)!;
const JOB: Job = { id: 'j1', studioId: 's1', kind: 'reading', subjectId: null, state: 'running', progress: 0.25, stage: 'Looking for ink', result: null, error: null, createdAt: '2026-01-01T00:00:00Z' };

beforeEach(() => {
  FakeSource.opened = [];
  vi.stubGlobal('EventSource', FakeSource);
});
afterEach(() => {
  vi.useRealTimers();
  vi.unstubAllGlobals();
  vi.restoreAllMocks();
});

describe('a studio\'s news', () => {
  it('are handed on by kind, and end when asked to', () => {
    const changed = vi.fn(), job = vi.fn();
    const end = listenToStudio('s1', { changed, job });
    expect(source().url).toBe('/api/events?studioId=s1');
    source().say('changed', { type: 'changed', noun: 'inks', id: 'i1' });
    source().say('job', { type: 'job', job: JOB });
    expect(changed).toHaveBeenCalledWith('inks', 'i1');
    expect(job).toHaveBeenCalledWith(JOB);
    end();
    expect(source().readyState).toBe(FakeSource.CLOSED);
  });

  it('tell of a reconnection, but not of the first connection', () => {
    const reconnected = vi.fn();
    const end = listenToStudio('s1', { reconnected });
    source().dispatchEvent(new Event('open'));
    expect(reconnected).not.toHaveBeenCalled();
    source().dispatchEvent(new Event('open'));
    expect(reconnected).toHaveBeenCalledOnce();
    end();
  });

  it('let go of their connection while nobody sees the tab, and catch up when it is seen again', () => {
    vi.useFakeTimers();
    const reconnected = vi.fn();
    const end = listenToStudio('s1', { reconnected });
    source().dispatchEvent(new Event('open'));
    const look = (state: DocumentVisibilityState) => {
      vi.spyOn(document, 'visibilityState', 'get').mockReturnValue(state);
      document.dispatchEvent(new Event('visibilitychange'));
    };
    look('hidden');
    vi.advanceTimersByTime(5_000);
    look('visible');
    expect([FakeSource.opened.length, source().readyState]).toEqual([1, 1]);
    look('hidden');
    vi.advanceTimersByTime(60_000);
    expect(source().readyState).toBe(FakeSource.CLOSED);
    look('visible');
    source().dispatchEvent(new Event('open'));
    expect(FakeSource.opened).toHaveLength(2);
    expect(reconnected).toHaveBeenCalledOnce();
    end();
    expect(source().readyState).toBe(FakeSource.CLOSED);
  });

  it('are opened anew where the browser has given up, and not after the end', () => {
    vi.useFakeTimers();
    const end = listenToStudio('s1', {});
    source().readyState = FakeSource.CLOSED;
    source().dispatchEvent(new Event('error'));
    vi.advanceTimersByTime(5000);
    expect(FakeSource.opened).toHaveLength(2);
    source().readyState = FakeSource.CLOSED;
    source().dispatchEvent(new Event('error'));
    end();
    vi.advanceTimersByTime(60_000);
    expect(FakeSource.opened).toHaveLength(2);
  });
});

describe('a job that is followed', () => {
  async function follow(answers: Job[]) {
    const fetch = vi.fn(async () => new Response(JSON.stringify(answers.length > 1 ? answers.shift() : answers[0])));
    vi.stubGlobal('fetch', fetch);
    const done = vi.fn();
    const here = await inComponent(() => {
      useStudio().id = 's1';
      useStudioNews().open('s1');
      return useJob(() => 'j1', done);
    });
    await settle();
    return { ...here, fetch, done };
  }

  it('is asked for first, so that progress comes back after a reload, then goes on by the news', async () => {
    const { result, unmount, done } = await follow([JOB]);
    expect(result.job.value).toMatchObject({ state: 'running', progress: 0.25 });
    source().say('job', { type: 'job', job: { ...JOB, progress: 0.5, stage: 'Measuring' } });
    expect(result.job.value).toMatchObject({ progress: 0.5, stage: 'Measuring' });
    expect(result.running.value).toBe(true);
    source().say('job', { type: 'job', job: { ...JOB, id: 'another', progress: 0.9 } });
    expect(result.job.value!.progress).toBe(0.5);
    expect(done).not.toHaveBeenCalled();
    unmount();
  });

  it('is asked for once more at its end, for its result, and tells it once', async () => {
    const { result, unmount, done } = await follow([JOB, { ...JOB, state: 'done', progress: 1, result: { sentiments: 9 } }]);
    source().say('job', { type: 'job', job: { ...JOB, state: 'done', progress: 1 } });
    await settle();
    source().say('job', { type: 'job', job: { ...JOB, state: 'done', progress: 1 } });
    await settle();
    expect(done).toHaveBeenCalledOnce();
    expect(done.mock.calls[0][0]).toMatchObject({ result: { sentiments: 9 } });
    expect(result.running.value).toBe(false);
    unmount();
  });

  it('catches up after the news were away', async () => {
    const { result, unmount } = await follow([JOB, { ...JOB, state: 'failed', error: { code: 'no-ink', message: 'No ink was found.' } }]);
    source().dispatchEvent(new Event('open'));
    source().dispatchEvent(new Event('open'));
    await settle();
    expect(result.job.value).toMatchObject({ state: 'failed', error: { message: 'No ink was found.' } });
    unmount();
  });
});
