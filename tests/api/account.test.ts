import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openKit } from './kit.ts';
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
    const answer = await register('ada@studio.example', { studioName: 'Tide Table Cards' }).expect(201);
    expect(answer.body.person).toMatchObject({ name: 'Ada Inker', email: 'ada@studio.example', unit: 'mm' });
    expect(answer.body.studios).toEqual([{ id: expect.any(String), name: 'Tide Table Cards', role: 'owner' }]);
  });
});
