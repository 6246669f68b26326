/** Walks every route of the contract with every role, with another studio's people, and signed out. A new route is walked by itself. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiRoutes } from '../../server/contract/index.ts';
import type { Access, RouteDefinition } from '../../server/contract/route.ts';
import { openKit } from './kit.ts';
import type { Agent, Kit } from './kit.ts';

const ROLES = ['helper', 'maker', 'owner'] as const;
/** Nothing has this id: who is let past the role check is told so, or that her body cannot be used, and nothing is changed. */
const NOWHERE = '0193a000-0000-7000-8000-000000000000';
const MAY: Record<Access, readonly string[]> = { anyone: ROLES, 'signed-in': ROLES, helper: ROLES, maker: ['maker', 'owner'], owner: ['owner'] };
/** These would end the walk: they sign out, or throw the walker out. Their own tests call them. */
const ENDING = new Set(['DELETE /session', 'DELETE /account/sessions', 'DELETE /studios/:studioId/membership']);

const table = Object.entries(apiRoutes) as [string, RouteDefinition][];
const inStudio = table.filter(([key]) => key.includes(':studioId') || key === 'GET /events');

let kit: Kit;
let otherStudio: string;
const agents: Partial<Record<(typeof ROLES)[number] | 'stranger', Agent>> = {};
beforeAll(async () => {
  kit = await openKit();
  for (const role of ROLES) agents[role] = await kit.signIn(role);
  otherStudio = await kit.makeStudio(await kit.makePerson());
  agents.stranger = await kit.signIn('owner', otherStudio);
});
afterAll(() => kit.close());

function address(key: string, studioId: string): { method: string; path: string } {
  const [method, path] = key.split(' ');
  const filled = path.replace(':studioId', studioId).replace(':token', 'AAAAAAAAAAAAAAAAAAAAAA').replace(/:\w+/g, NOWHERE);
  return { method, path: `${filled}${path === '/events' ? `?studioId=${studioId}` : ''}` };
}

/** Only the status: a stream of events is left as soon as it has begun. */
async function statusOf(key: string, agent: Agent | null, studioId: string): Promise<{ status: number; type: string; code?: string }> {
  const { method, path } = address(key, studioId);
  const abort = new AbortController();
  const answer = await fetch(`${kit.url}/api${path}`, {
    method,
    signal: abort.signal,
    headers: { ...(agent ? { Cookie: agent.cookie, 'X-CSRF-Token': agent.csrfToken } : {}), ...(method === 'GET' ? {} : { 'Content-Type': 'application/json' }) },
    ...(method === 'GET' || method === 'DELETE' ? {} : { body: '{}' }),
  });
  const type = answer.headers.get('content-type') ?? '';
  const code = type.includes('problem+json') ? ((await answer.json()) as { code: string }).code : undefined;
  abort.abort();
  return { status: answer.status, type, code };
}

describe('every route', () => {
  it('is mounted as the contract says, and no other', () => {
    const mounted = Object.assign({}, ...kit.application.features.map((f) => f.table)) as Record<string, RouteDefinition>;
    const described = table.filter(([key]) => !['GET /health/live', 'GET /health/ready', 'GET /openapi.json'].includes(key)).map(([key]) => key);
    expect(Object.keys(mounted).sort()).toEqual(described.sort());
  });

  it('names the studio in its path wherever its rule is a role', () => {
    for (const [key, route] of table) {
      const asksRole = ROLES.some((role) => role === route.access);
      expect(asksRole, key).toBe(inStudio.some(([k]) => k === key));
    }
  });

  it.each(table.filter(([, route]) => route.access !== 'anyone'))('%s: refuses whoever is not signed in', async (key) => {
    expect(await statusOf(key, null, kit.studioId)).toMatchObject({ status: 401, code: 'not-signed-in' });
  });

  it.each(inStudio)('%s: is nowhere for the owner of another studio', async (key) => {
    expect(await statusOf(key, agents.stranger!, kit.studioId)).toMatchObject({ status: 404, code: 'not-found' });
  });

  for (const role of ROLES) {
    it.each(table.filter(([key]) => !ENDING.has(key)))(`${role}, %s: is let in or refused in words, as the contract says`, async (key, route) => {
      const { status, code } = await statusOf(key, agents[role]!, kit.studioId);
      if (MAY[route.access].includes(role)) {
        expect(status, code).not.toBe(403);
        expect(status).not.toBe(401);
        expect(status).toBeLessThan(500);
      } else {
        expect({ status, code }).toEqual({ status: 403, code: 'forbidden' });
      }
    });
  }

  it('answers a refusal with who may, so that a helper knows whom to ask', async () => {
    const { body } = await agents.helper!.patch('/studios/:studioId', { version: 1, name: 'Mine now' }).expect(403);
    expect(body.detail).toBe('Only an owner of the studio can do this; you are a helper here. Ask an owner if you need it.');
    expect(body).toMatchObject({ type: 'urn:inkmuster:problem:forbidden', title: 'Forbidden', status: 403 });
  });

  it('shuts out a removed member at once, in the session she has open', async () => {
    const gone = await kit.signIn('maker');
    await gone.get('/studios/:studioId').expect(200);
    await agents.owner!.delete(`/studios/:studioId/members/${gone.person.id}`).expect(204);
    await gone.get('/studios/:studioId').expect(404);
  });
});

describe('the description at /api/openapi.json', () => {
  it('holds every route with its parameters and answers, and nothing else', async () => {
    const { body } = await kit.anonymous.get('/openapi.json').expect(200);
    const described = Object.entries(body.paths as Record<string, object>).flatMap(([path, operations]) => Object.keys(operations).map((method) => `${method.toUpperCase()} ${path.replace(/\{(\w+)\}/g, ':$1')}`));
    expect(described.sort()).toEqual(table.map(([key]) => key).sort());
    // References that only hold within a schema of its own would lead nowhere in the whole.
    expect(JSON.stringify(body).match(/"\$ref":"(?!#\/components\/schemas\/Problem")[^"]*"/g) ?? []).toEqual([]);
    for (const [key, route] of table) {
      const [method, path] = key.split(' ');
      const operation = body.paths[path.replace(/:(\w+)/g, '{$1}')][method.toLowerCase()];
      expect(operation.summary).toBe(route.summary);
      expect(operation.parameters.filter((p: { in: string }) => p.in === 'path').map((p: { name: string }) => `:${p.name}`)).toEqual(path.match(/:\w+/g) ?? []);
      expect(Boolean(operation.requestBody)).toBe(Boolean(route.body || route.upload));
      expect(operation.responses.default.content['application/problem+json']).toBeDefined();
    }
  });
});
