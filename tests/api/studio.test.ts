import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openKit, PASSWORD } from './kit.ts';
import type { Agent, Kit } from './kit.ts';

let kit: Kit;
let owner: Agent;
let maker: Agent;
let helper: Agent;
beforeAll(async () => {
  kit = await openKit();
  [owner, maker, helper] = [await kit.signIn('owner'), await kit.signIn('maker'), await kit.signIn('helper')];
});
afterAll(() => kit.close());

describe('a studio', () => {
  it('is made by anybody, who becomes its owner, and is listed with the role', async () => {
    const { body } = await helper.post('/studios', { name: '  Second home ' }).expect(201);
    expect(body).toMatchObject({ name: 'Second home', role: 'owner', version: 1 });
    const list = (await helper.get('/studios').expect(200)).body.items;
    expect(list.map((s: { name: string; role: string }) => [s.name, s.role])).toEqual([['Second home', 'owner'], ['Test studio', 'helper']]);
  });

  it('is renamed by its version only; a stale edit gets the present row and changes nothing', async () => {
    const { body: now } = await owner.get('/studios/:studioId').expect(200);
    await owner.patch('/studios/:studioId', { version: now.version, name: 'North window' }).expect(200);
    const late = await owner.patch('/studios/:studioId', { version: now.version, name: 'South window' }).expect(409);
    expect(late.body).toMatchObject({ code: 'stale', current: { name: 'North window', version: now.version + 1 } });
    expect((await owner.get('/studios/:studioId')).body.name).toBe('North window');
  });

  it('is deleted only by typing its name, and then is nowhere', async () => {
    const { body } = await owner.post('/studios', { name: 'For a week' }).expect(201);
    const refused = await owner.delete(`/studios/${body.id}?confirm=for+a+week`).expect(400);
    expect(refused.body.errors[0].path).toBe('confirm');
    await owner.delete(`/studios/${body.id}?confirm=For+a+week`).expect(204);
    await owner.get(`/studios/${body.id}`).expect(404);
    expect((await owner.get('/deleted-studios').expect(200)).body.items).toEqual([{ id: body.id, name: 'For a week', deletedAt: expect.any(String) }]);
    expect((await maker.get('/deleted-studios').expect(200)).body.items).toEqual([]);
    await maker.post(`/studios/${body.id}/restore`).expect(404);
    await owner.post(`/studios/${body.id}/restore`).expect(200);
    await owner.get(`/studios/${body.id}`).expect(200);
    await owner.post(`/studios/${body.id}/restore`).expect(404);
  });
});

describe('settings', () => {
  it('begin with the usual limits and pace', async () => {
    const { body } = await helper.get('/studios/:studioId/settings').expect(200);
    expect(body).toMatchObject({ version: 1, unit: 'mm', goodMm: 3, snugMm: 1.5, pace: { setup: 4, press: 0.5, cutPass: 0.75 } });
    expect(body.pace.perStamp).toBeCloseTo(1 / 3, 12);
  });

  it('take part of a change, and refuse limits the wrong way round, also across two changes', async () => {
    const { body } = await owner.patch('/studios/:studioId/settings', { version: 1, goodMm: 4, pace: { setup: 5, perStamp: 0.5, press: 0.5, perInked: 0.1, cutPass: 1 } }).expect(200);
    expect(body).toMatchObject({ version: 2, goodMm: 4, snugMm: 1.5, pace: { setup: 5, cutPass: 1 } });
    const refused = await owner.patch('/studios/:studioId/settings', { version: 2, snugMm: 4.5 }).expect(400);
    expect(refused.body.detail).toMatch(/less than snug/);
    const late = await owner.patch('/studios/:studioId/settings', { version: 1, gapMm: 9 }).expect(409);
    expect(late.body.current).toMatchObject({ version: 2, goodMm: 4 });
  });
});

describe('people', () => {
  it('are listed for everybody, with addresses for owners only', async () => {
    const seenByOwner = (await owner.get('/studios/:studioId/members').expect(200)).body.items;
    const seenByMaker = (await maker.get('/studios/:studioId/members').expect(200)).body.items;
    expect(seenByOwner.find((m: { personId: string }) => m.personId === helper.person.id)).toMatchObject({ name: helper.person.name, email: helper.person.email, role: 'helper' });
    expect(seenByMaker).toHaveLength(seenByOwner.length);
    expect(seenByMaker.every((m: { email: null }) => m.email === null)).toBe(true);
  });

  it('change roles at an owner’s word, at once', async () => {
    const person = await kit.signIn('helper');
    await owner.patch(`/studios/:studioId/members/${person.person.id}`, { role: 'owner' }).expect(200);
    await person.get('/studios/:studioId/audit').expect(200);
    await owner.patch(`/studios/:studioId/members/${person.person.id}`, { role: 'helper' }).expect(200);
    await person.get('/studios/:studioId/audit').expect(403);
  });

  it('never lose their last owner: not by demoting, removing, leaving, nor by two owners stepping back at once', async () => {
    const first = await kit.makePerson();
    const studioId = await kit.makeStudio(first);
    const [a, b] = [await kit.signInAs(first, studioId), await kit.signIn('owner', studioId)];
    const both = await Promise.all([a.delete('/studios/:studioId/membership'), b.delete('/studios/:studioId/membership')]);
    expect(both.map((r) => r.status).sort()).toEqual([204, 409]);
    const last = both[0].status === 409 ? a : b;
    for (const answer of [await last.delete('/studios/:studioId/membership'), await last.patch(`/studios/:studioId/members/${last.person.id}`, { role: 'maker' }), await last.delete(`/studios/:studioId/members/${last.person.id}`)]) {
      expect(answer.status).toBe(409);
      expect(answer.body.code).toBe('last-owner');
    }
  });
});

describe('an invitation link', () => {
  const tokenOf = (link: string) => link.split('/').pop()!;

  it('lets one person in, in its role, and is shown once', async () => {
    const { body } = await owner.post('/studios/:studioId/invitations', { role: 'maker', note: 'for the Tuesday table' }).expect(201);
    expect(body.link).toMatch(/^http:\/\/127\.0\.0\.1:\d+\/invitations\/[\w-]{22}$/);
    const token = tokenOf(body.link);
    const open = (await owner.get('/studios/:studioId/invitations').expect(200)).body;
    expect(open.items).toHaveLength(1);
    expect(JSON.stringify(open)).not.toContain(token);
    expect((await kit.anonymous.get(`/invitations/${token}`).expect(200)).body).toMatchObject({ studioName: 'North window', role: 'maker' });

    const guest = await kit.signInAs(await kit.makePerson());
    expect((await guest.post(`/invitations/${token}/accept`).expect(200)).body).toMatchObject({ role: 'maker', id: kit.studioId });
    await guest.get('/studios/:studioId').expect(200);
    const second = await kit.signInAs(await kit.makePerson());
    await second.post(`/invitations/${token}/accept`).expect(404);
    expect((await owner.get('/studios/:studioId/invitations')).body.items).toHaveLength(0);
  });

  it('lets one in where two use it at the same moment', async () => {
    const { body } = await owner.post('/studios/:studioId/invitations', { role: 'helper' }).expect(201);
    const people = await Promise.all([1, 2, 3].map(async () => kit.signInAs(await kit.makePerson())));
    const answers = await Promise.all(people.map((p) => p.post(`/invitations/${tokenOf(body.link)}/accept`)));
    expect(answers.map((a) => a.status).sort()).toEqual([200, 404, 404]);
  });

  it('can be used while registering, instead of making a studio', async () => {
    const { body } = await owner.post('/studios/:studioId/invitations', { role: 'helper' }).expect(201);
    const answer = await kit.anonymous.post('/account', { name: 'New Hand', email: 'new.hand@studio.example', password: PASSWORD, invitation: tokenOf(body.link) }).expect(201);
    expect(answer.body.studios).toEqual([{ id: kit.studioId, name: 'North window', role: 'helper' }]);
  });

  it('is dead once withdrawn or expired, and registering with it leaves no account behind', async () => {
    const { body } = await owner.post('/studios/:studioId/invitations', { role: 'helper' }).expect(201);
    await owner.delete(`/studios/:studioId/invitations/${body.invitation.id}`).expect(204);
    await kit.anonymous.get(`/invitations/${tokenOf(body.link)}`).expect(404);
    const { body: late } = await owner.post('/studios/:studioId/invitations', { role: 'helper' }).expect(201);
    await kit.db('invitations').where({ id: late.invitation.id }).update({ expires_at: kit.db.raw(`now() - interval '1 second'`) });
    await kit.anonymous.post('/account', { name: 'Late', email: 'late@studio.example', password: PASSWORD, invitation: tokenOf(late.link) }).expect(404);
    expect(await kit.db('users').where({ email: 'late@studio.example' })).toHaveLength(0);
  });

  it('is stored as a hash only', async () => {
    const { body } = await owner.post('/studios/:studioId/invitations', { role: 'helper' }).expect(201);
    const { rows } = await kit.db.raw(`SELECT i::text AS row FROM invitations i`);
    expect(rows.every((r: { row: string }) => !r.row.includes(tokenOf(body.link)))).toBe(true);
  });
});

describe('the audit log', () => {
  it('tells owners who changed whose rights, newest first, page by page', async () => {
    const { body } = await owner.get('/studios/:studioId/audit?limit=200').expect(200);
    const actions = body.items.map((e: { action: string }) => e.action);
    expect(actions).toContain('invitation.made');
    expect(actions).toContain('invitation.accepted');
    expect(body.items.find((e: { action: string }) => e.action === 'role.changed')).toMatchObject({ person: owner.person.name, details: { from: 'owner', to: 'helper' } });
    const first = (await owner.get('/studios/:studioId/audit?limit=2')).body;
    const second = (await owner.get(`/studios/:studioId/audit?limit=2&before=${first.next}`)).body;
    expect([...first.items, ...second.items].map((e) => e.id)).toEqual(body.items.slice(0, 4).map((e: { id: number }) => e.id));
  });
});
