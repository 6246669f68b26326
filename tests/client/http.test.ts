import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { ApiError } from '../../src/api/api-error.ts';
import { addressOf, call, setCsrfToken, whenSignedOut } from '../../src/api/http.ts';

const STUDIO = '0193a000-0000-7000-8000-000000000001';
let asked: { address: string; init: RequestInit }[];

function answers(...list: (Response | Error)[]): void {
  const queue = [...list];
  vi.stubGlobal('fetch', vi.fn(async (address: string, init: RequestInit) => {
    asked.push({ address, init });
    const next = queue.shift();
    if (next instanceof Error) throw next;
    return next ?? new Response(null, { status: 204 });
  }));
}
const json = (body: unknown, status = 200) => new Response(JSON.stringify(body), { status, headers: { 'Content-Type': 'application/json' } });
const problem = (status: number, more: object) => json({ type: 'about:blank', title: '', status, ...more }, status);
const failure = async (promise: Promise<unknown>): Promise<ApiError> => promise.then(() => { throw new Error('It did not fail.'); }, (error: ApiError) => error);

beforeEach(() => {
  asked = [];
  setCsrfToken(null);
});
afterEach(() => vi.unstubAllGlobals());

describe('the address of a call', () => {
  it('holds path and query, encoded, without what is not given', () => {
    expect(addressOf('/studios/:studioId/inks', { studioId: STUDIO }, { search: 'a & b', sort: undefined, cursor: '', limit: 20 })).toBe(`/api/studios/${STUDIO}/inks?search=a+%26+b&limit=20`);
    expect(addressOf('/invitations/:token', { token: '../account' })).toBe('/api/invitations/..%2Faccount');
  });

  it('is never made with a hole in it', () => {
    expect(() => addressOf('/studios/:studioId/inks')).toThrow('studioId');
  });
});

describe('a call', () => {
  it('sends the form token with changes only, and the body as JSON', async () => {
    answers(json({ items: [], next: null, total: 0 }), json({ id: 'x' }, 201));
    setCsrfToken('token-1');
    await call('GET /studios/:studioId/inks', { params: { studioId: STUDIO } });
    await call('POST /studios', { body: { name: 'North window' }, idempotencyKey: 'once-only-1' });
    expect(asked[0].init.headers).not.toHaveProperty('X-CSRF-Token');
    expect(asked[1].init.headers).toMatchObject({ 'X-CSRF-Token': 'token-1', 'Content-Type': 'application/json', 'Idempotency-Key': 'once-only-1' });
    expect(asked[1].init.body).toBe('{"name":"North window"}');
  });

  it('gives undefined where there is no content', async () => {
    answers(new Response(null, { status: 204 }));
    expect(await call('DELETE /session')).toBeUndefined();
  });

  it('fails with the words, the code, the fields and the present row that the server gave', async () => {
    answers(problem(409, { code: 'stale', detail: 'It was changed by someone else.', current: { version: 3 } }), problem(400, { code: 'invalid', detail: 'No.', errors: [{ path: 'pace.setup', message: 'Must not be negative.' }] }));
    const stale = await failure(call('GET /session'));
    expect(stale).toBeInstanceOf(ApiError);
    expect([stale.status, stale.code, stale.message, stale.current]).toEqual([409, 'stale', 'It was changed by someone else.', { version: 3 }]);
    const invalid = await failure(call('GET /session'));
    expect(invalid.fieldMessage('pace.setup')).toBe('Must not be negative.');
    expect(invalid.fieldMessage('name')).toBeNull();
  });

  it('says in words when no answer came, and when something else than the server answered', async () => {
    answers(new TypeError('fetch failed'), new Response('<html>502 Bad Gateway</html>', { status: 502 }));
    expect(await failure(call('GET /session'))).toMatchObject({ status: 0, code: 'offline', detail: expect.stringContaining('cannot be reached') });
    expect(await failure(call('GET /session'))).toMatchObject({ status: 502, code: 'unknown', detail: expect.stringContaining('502') });
  });

  it('that was given up stays what it is: no failure to be shown', async () => {
    const controller = new AbortController();
    controller.abort();
    answers(new DOMException('given up', 'AbortError') as unknown as Error);
    expect((await failure(call('GET /session', { signal: controller.signal }))).name).toBe('AbortError');
  });

  it('tells once the session has ended, but not for a wrong password', async () => {
    const told = vi.fn();
    whenSignedOut(told);
    answers(problem(401, { code: 'wrong-password', detail: 'No.' }), problem(401, { code: 'not-signed-in', detail: 'Sign in to go on.' }));
    await failure(call('GET /session'));
    expect(told).not.toHaveBeenCalled();
    await failure(call('GET /session'));
    expect(told).toHaveBeenCalledOnce();
  });
});

describe('the types of a call', () => {
  it('ask for what the route needs and refuse what it has not', () => {
    const never = () => false as boolean;
    if (never()) {
      // @ts-expect-error the studio is missing
      void call('GET /studios/:studioId/inks', {});
      // @ts-expect-error a route that is not in the contract
      void call('GET /nowhere');
      // @ts-expect-error inks are not sorted by weight
      void call('GET /studios/:studioId/inks', { params: { studioId: STUDIO }, query: { sort: 'weight' } });
      // @ts-expect-error this route takes no body
      void call('DELETE /session', { body: {} });
    }
    expect(asked).toEqual([]);
  });
});
