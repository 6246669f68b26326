import { createHmac } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openKit, PASSWORD } from './kit.ts';
import type { Kit } from './kit.ts';

const GOOD = 'a lamp, two boats and some rain';
let kit: Kit;
beforeAll(async () => {
  kit = await openKit();
});
afterAll(() => kit.close());

const register = (email: string, more: object = {}) => kit.anonymous.post('/account', { name: 'Ada Inker', email, password: GOOD, ...more });

describe('registering', () => {
  it('makes the account, a studio of which the person is owner, and signs in', async () => {
    const answer = await register('Ada@Studio.example', { studioName: 'Tide Table Cards', unit: 'in' }).expect(201);
    expect(answer.body.person).toMatchObject({ name: 'Ada Inker', email: 'ada@studio.example', unit: 'in' });
    expect(answer.body.studios).toEqual([{ id: expect.any(String), name: 'Tide Table Cards', role: 'owner' }]);
    const cookie = answer.get('Set-Cookie')![0];
    expect(cookie).toMatch(/HttpOnly/);
    expect(cookie).toMatch(/SameSite=Lax/);
    const again = await register('ada@studio.example').expect(409);
    expect(again.body).toMatchObject({ code: 'email-taken', errors: [{ path: 'email' }] });
  });

  it.each([
    ['short', 'fourteen chars', /15 characters/],
    ['on the list', 'correct horse battery staple', /guessed first/],
    ['repetition', 'abcabcabcabcabcabc', /repeats/],
    ['own name', 'brin@studio.example', /a name that others know/],
  ])('refuses a password that is %s, with the reason', async (_why, password, words) => {
    const answer = await register('brin@studio.example', { password }).expect(400);
    expect(answer.body.errors[0].message).toMatch(words);
  });

  it('keeps long passwords whole: what differs after byte 72 is another password', async () => {
    const long = 'the ferry leaves at nine and the geese know it well, said the baker to the bell'; // 79 characters
    await register('long@studio.example', { password: `${long} one` }).expect(201);
    await kit.anonymous.post('/session', { email: 'long@studio.example', password: `${long} two` }).expect(401);
    await kit.anonymous.post('/session', { email: 'long@studio.example', password: `${long} one` }).expect(200);
  });

  it('stores nothing that is no field of the form', async () => {
    const answer = await register('mass@studio.example', { id: '00000000-0000-4000-8000-000000000000', password_hash: 'x', role: 'owner' }).expect(201);
    expect(answer.body.person.id).not.toBe('00000000-0000-4000-8000-000000000000');
  });
});

describe('signing in', () => {
  it('gives a new session id each time and ends the old one at sign-out', async () => {
    const person = await kit.makePerson();
    const first = await kit.signInAs(person);
    const second = await kit.signInAs(person);
    expect(second.cookie).not.toBe(first.cookie);
    await first.get('/studios').expect(200);
    await first.delete('/session').expect(204);
    await first.get('/studios').expect(401);
    await second.get('/studios').expect(200);
  });

  it('does not take a session id that a stranger planted', async () => {
    const person = await kit.makePerson();
    const sid = 'plantedplantedplantedplanted0000';
    const signature = createHmac('sha256', kit.deps.config.sessionSecret).update(sid).digest('base64').replace(/=+$/, '');
    const planted = `inkmuster=${encodeURIComponent(`s:${sid}.${signature}`)}`;
    const answer = await kit.anonymous.post('/session', { email: person.email, password: PASSWORD }).set('Cookie', planted).expect(200);
    expect(answer.get('Set-Cookie')![0]).not.toContain(sid);
    await kit.anonymous.get('/studios').set('Cookie', planted).expect(401);
  });

  it('tells a wrong password and an unknown address apart in no way', async () => {
    const person = await kit.makePerson();
    const wrong = await kit.anonymous.post('/session', { email: person.email, password: 'not the password' }).expect(401);
    const unknown = await kit.anonymous.post('/session', { email: 'nobody@studio.example', password: 'not the password' }).expect(401);
    expect(unknown.body).toEqual(wrong.body);
  });

  it('holds up whoever tries ten passwords on one account, known or not, and lets others in', async () => {
    const person = await kit.makePerson();
    for (const email of [person.email, 'no-such-person@studio.example']) {
      const tries = await Promise.all(Array.from({ length: 14 }, () => kit.anonymous.post('/session', { email, password: 'guess' })));
      expect(tries.filter((t) => t.status === 401)).toHaveLength(10);
      const held = tries.find((t) => t.status === 429)!;
      expect(held.body.detail).toMatch(/Try again in \d+ minutes/);
      expect(Number(held.get('Retry-After'))).toBeGreaterThan(60);
    }
    await kit.anonymous.post('/session', { email: person.email, password: PASSWORD }).expect(429);
    await kit.signInAs(await kit.makePerson());
  });

  it('can be followed by the next request at once, every time', async () => {
    const person = await kit.makePerson();
    for (let i = 0; i < (process.env.LONG ? 200 : 25); i += 1) await (await kit.signInAs(person)).get('/studios').expect(200);
  });

  it('is over when the session is older than it may be, however busy', async () => {
    const agent = await kit.signIn('maker');
    await kit.db.raw(`UPDATE sessions SET sess = jsonb_set(sess::jsonb, '{startedAt}', '1000')::json WHERE person_id = ?`, [agent.person.id]);
    await agent.get('/studios').expect(401);
  });
});

describe('changes from elsewhere', () => {
  it('are refused from another site, and without the form token', async () => {
    const agent = await kit.signIn('owner');
    const foreign = await agent.post('/studios', { name: 'Stolen' }).set('Origin', 'https://elsewhere.example').expect(403);
    expect(foreign.body.code).toBe('foreign-origin');
    await agent.post('/studios', { name: 'Stolen' }).set('Sec-Fetch-Site', 'cross-site').expect(403);
    const bare = await kit.anonymous.post('/studios', { name: 'Stolen' }).set('Cookie', agent.cookie).expect(403);
    expect(bare.body.code).toBe('form-token');
    const other = await kit.signIn('owner');
    await kit.anonymous.post('/studios', { name: 'Stolen' }).set('Cookie', agent.cookie).set('X-CSRF-Token', other.csrfToken).expect(403);
    await agent.post('/studios', { name: 'Mine' }).set('Origin', kit.url).expect(201);
    await kit.anonymous.post('/session', { email: agent.person.email, password: PASSWORD }).set('Origin', 'https://elsewhere.example').expect(403);
  });
});

describe('the account page', () => {
  it('changes name and unit', async () => {
    const agent = await kit.signIn('helper');
    await agent.patch('/account', { name: 'Quill Marsh', unit: 'in' }).expect(200);
    const { body } = await agent.get('/session').expect(200);
    expect(body.person).toMatchObject({ name: 'Quill Marsh', unit: 'in' });
  });

  it('changes the password only with the present one, and ends every other session', async () => {
    const person = await kit.makePerson();
    const [here, there] = [await kit.signInAs(person), await kit.signInAs(person)];
    const refused = await here.put('/account/password', { currentPassword: 'wrong', newPassword: GOOD }).expect(400);
    expect(refused.body.errors).toEqual([{ path: 'currentPassword', message: expect.stringContaining('not your present password') }]);
    const changed = await here.put('/account/password', { currentPassword: PASSWORD, newPassword: GOOD }).expect(200);
    await there.get('/studios').expect(401);
    await here.get('/studios').expect(401);
    const renewed = changed.get('Set-Cookie')![0].split(';')[0];
    await kit.anonymous.get('/studios').set('Cookie', renewed).expect(200);
    await kit.anonymous.post('/session', { email: person.email, password: PASSWORD }).expect(401);
    await kit.anonymous.post('/session', { email: person.email, password: GOOD }).expect(200);
  });

  it('lists where the person is signed in and ends what she chooses', async () => {
    const person = await kit.makePerson();
    const [here, there, further] = [await kit.signInAs(person), await kit.signInAs(person), await kit.signInAs(person)];
    const { body } = await here.get('/account/sessions').expect(200);
    expect(body.items).toHaveLength(3);
    expect(body.items.filter((s: { current: boolean }) => s.current)).toHaveLength(1);
    expect(JSON.stringify(body)).not.toContain(decodeURIComponent(here.cookie).slice(13, 40));
    const stranger = await kit.signIn('helper');
    await stranger.delete(`/account/sessions/${body.items[0].id}`).expect(404);
    const other = body.items.find((s: { current: boolean }) => !s.current);
    await here.delete(`/account/sessions/${other.id}`).expect(204);
    expect([(await there.get('/studios')).status, (await further.get('/studios')).status].sort()).toEqual([200, 401]);
    await here.delete('/account/sessions').expect(204);
    expect([(await there.get('/studios')).status, (await further.get('/studios')).status]).toEqual([401, 401]);
    await here.get('/studios').expect(200);
  });
});
