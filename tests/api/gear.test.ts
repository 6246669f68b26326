import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openKit } from './kit.ts';
import type { Agent, Kit } from './kit.ts';

let kit: Kit;
let maker: Agent;
let helper: Agent;
let stranger: Agent;
beforeAll(async () => {
  kit = await openKit();
  [maker, helper] = [await kit.signIn('maker'), await kit.signIn('helper')];
  stranger = await kit.signIn('owner', await kit.makeStudio(await kit.makePerson()));
});
afterAll(() => kit.close());

/** One of each kind, as little as has to be said, and one change to it. */
const KINDS = [
  { path: 'platforms', body: { name: 'Small bed', widthMm: 160, heightMm: 170 }, given: { corner: 'top-left', hinge: 'left', openSides: null, lid: null, keepOuts: [] }, change: { corner: 'top-right' } },
  { path: 'printers', body: { name: 'By the window', paper: { widthMm: 210, heightMm: 297 }, unprintable: { left: 4, right: 4, top: 4, bottom: 12 } }, given: { scale: { x: 1, y: 1 }, shift: { x: 0, y: 0 } }, change: { scale: { x: 0.996, y: 1.002 } } },
  { path: 'cardstocks', body: { name: 'White, smooth', widthMm: 139.7, heightMm: 165.1 }, given: { colour: '#FFFFFF', onHand: 0, grain: 'unknown', weightGsm: null }, change: { onHand: 24 } },
  { path: 'inks', body: { name: 'Night', kind: 'pigment', colour: '#1b2340' }, given: { colour: '#1B2340', dryingMinutes: 2, clearMm: 20 }, change: { dryingMinutes: 15 } },
] as const;

const at = (path: string, id = '') => `/studios/:studioId/${path}${id && `/${id}`}`;

describe.each(KINDS)('$path', ({ path, body, given, change }) => {
  it('are added with what was said and sensible values for the rest', async () => {
    const { body: made } = await maker.post(at(path), body).expect(201);
    expect(made).toMatchObject({ ...body, ...given, version: 1, note: '', deletedAt: null });
    expect((await helper.get(at(path, made.id)).expect(200)).body).toEqual(made);
  });

  it('are changed by a maker with the version in hand; a stale edit gets the row as it is and overwrites nothing', async () => {
    const { body: made } = await maker.post(at(path), body).expect(201);
    const { body: changed } = await maker.patch(at(path, made.id), { version: 1, ...change }).expect(200);
    expect(changed).toMatchObject({ ...change, version: 2, name: body.name });
    const late = await maker.patch(at(path, made.id), { version: 1, name: 'Too late' }).expect(409);
    expect(late.body).toMatchObject({ code: 'stale', current: { name: body.name, version: 2 } });
    expect((await maker.get(at(path, made.id))).body).toEqual(changed);
  });

  it('go to the bin and come back with all they had', async () => {
    const { body: made } = await maker.post(at(path), { ...body, name: 'For the bin' }).expect(201);
    await maker.delete(at(path, made.id)).expect(204);
    await maker.get(at(path, made.id)).expect(404);
    await maker.patch(at(path, made.id), { version: 2, name: 'Ghost' }).expect(404);
    const names = (list: { body: { items: { name: string }[] } }) => list.body.items.map((item) => item.name);
    expect(names(await helper.get(at(path)))).not.toContain('For the bin');
    expect(names(await helper.get(`${at(path)}?bin=true`))).toEqual(['For the bin']);
    const { body: back } = await maker.post(`${at(path, made.id)}/restore`).expect(200);
    expect(back).toMatchObject({ ...body, ...given, name: 'For the bin', deletedAt: null });
    await maker.post(`${at(path, made.id)}/restore`).expect(404);
  });

  it('are refused to helpers in words, and are nowhere for another studio', async () => {
    const { body: made } = await maker.post(at(path), body).expect(201);
    expect((await helper.post(at(path), body).expect(403)).body.detail).toMatch(/maker/i);
    await helper.delete(at(path, made.id)).expect(403);
    await stranger.get(at(path, made.id)).expect(404);
    await stranger.patch(at(path, made.id), { version: 1, name: 'Mine' }).expect(404);
    await stranger.delete(at(path, made.id)).expect(404);
  });
});

describe('a list of gear', () => {
  it('is searched by name and note, in which a per cent sign is only a character', async () => {
    await maker.post(at('inks'), { name: 'Moss 50%', kind: 'dye', colour: '#406030' }).expect(201);
    await maker.post(at('inks'), { name: 'Rust', note: 'like old moss walls', kind: 'hybrid', colour: '#804020' }).expect(201);
    const find = async (search: string) => (await helper.get(`${at('inks')}?search=${encodeURIComponent(search)}`).expect(200)).body.items.map((i: { name: string }) => i.name);
    expect(await find('MOSS')).toEqual(['Moss 50%', 'Rust']);
    expect(await find('50%')).toEqual(['Moss 50%']);
    expect(await find('%')).toEqual(['Moss 50%']);
    expect(await find('nothing like it')).toEqual([]);
  });

  it('is paged without gaps or repeats, in the order that was asked for', async () => {
    for (const [i, onHand] of [5, 5, 1, 90, 5, 12].entries()) await maker.post(at('cardstocks'), { name: `Stock ${i}`, note: 'paged', widthMm: 100, heightMm: 150, onHand }).expect(201);
    const seen: number[] = [];
    let cursor = '';
    let pages = 0;
    do {
      const { body } = await helper.get(`${at('cardstocks')}?search=paged&sort=-onHand&limit=2${cursor && `&cursor=${cursor}`}`).expect(200);
      expect(body.total).toBe(6);
      seen.push(...body.items.map((c: { onHand: number }) => c.onHand));
      cursor = body.next ?? '';
      pages += 1;
    } while (cursor);
    expect(seen).toEqual([90, 12, 5, 5, 5, 1]);
    expect(pages).toBe(3);
  });
});

describe('a platform', () => {
  it('keeps lid and keep-outs on its bed, told by the field', async () => {
    const bed = { name: 'Bed', widthMm: 160, heightMm: 170 };
    const past = await maker.post(at('platforms'), { ...bed, keepOuts: [{ x: 0, y: 0, w: 10, h: 10 }, { x: 155, y: 0, w: 10, h: 10 }] }).expect(400);
    expect(past.body.errors).toEqual([{ path: 'keepOuts.1', message: 'Keep-out 2 reaches past the bed.' }]);
    const { body: made } = await maker.post(at('platforms'), { ...bed, lid: { x: 5, y: 5, w: 150, h: 160 } }).expect(201);
    // A smaller bed alone would leave the lid hanging over: the whole is judged, not only what changes.
    const smaller = await maker.patch(at('platforms', made.id), { version: 1, widthMm: 120 }).expect(400);
    expect(smaller.body.errors[0]).toMatchObject({ path: 'lid' });
    await maker.patch(at('platforms', made.id), { version: 1, widthMm: 120, lid: null }).expect(200);
  });
});

describe('a printer', () => {
  it('must leave something of the paper, and is not corrected beyond reason', async () => {
    const paper = { name: 'P', paper: { widthMm: 100, heightMm: 150 } };
    const none = await maker.post(at('printers'), { ...paper, unprintable: { left: 60, right: 40, top: 0, bottom: 0 } }).expect(400);
    expect(none.body.errors[0].path).toBe('unprintable.right');
    await maker.post(at('printers'), { ...paper, unprintable: { left: 3, right: 3, top: 3, bottom: 3 }, scale: { x: 0.5, y: 1 } }).expect(400);
  });
});

describe('the pages of a printer', () => {
  it.each(['test', 'photo'])('%s page is a PDF of the printer\'s paper, for helpers too, and nobody else', async (page) => {
    const { body: made } = await maker.post(at('printers'), { name: 'For pages', paper: { widthMm: 210, heightMm: 297 }, unprintable: { left: 4, right: 4, top: 4, bottom: 4 } }).expect(201);
    const answer = await helper.get(`${at('printers', made.id)}/pages/${page}?unit=in`).buffer(true).parse((response, done) => {
      const parts: Buffer[] = [];
      response.on('data', (part: Buffer) => parts.push(part)).on('end', () => done(null, Buffer.concat(parts)));
    }).expect(200).expect('content-type', 'application/pdf');
    const pdf = (answer.body as Buffer).toString('latin1');
    expect(pdf.startsWith('%PDF-')).toBe(true);
    const [, width, height] = /MediaBox \[0 0 ([\d.]+) ([\d.]+)\]/.exec(pdf)!.map(Number);
    // ISO 32000-1 §8.3.2.3: 72 points an inch.
    expect([(width / 72) * 25.4, (height / 72) * 25.4]).toEqual([expect.closeTo(210, 1), expect.closeTo(297, 1)]);
    await stranger.get(`${at('printers', made.id)}/pages/${page}`).expect(404);
    await helper.get(`${at('printers', made.id)}/pages/other`).expect(404);
  });
});

describe('two people at the same piece of gear', () => {
  it('never both win: of ten changes sent at once with one version, one is kept', async () => {
    const { body: made } = await maker.post(at('cardstocks'), { name: 'Wanted by all', widthMm: 100, heightMm: 100 }).expect(201);
    const answers = await Promise.all(Array.from({ length: 10 }, (_, i) => maker.patch(at('cardstocks', made.id), { version: 1, onHand: i + 1 })));
    expect(answers.filter((a) => a.status === 200)).toHaveLength(1);
    expect(answers.filter((a) => a.status === 409)).toHaveLength(9);
    const won = answers.find((a) => a.status === 200)!.body.onHand;
    expect((await maker.get(at('cardstocks', made.id))).body).toMatchObject({ onHand: won, version: 2 });
  });
});
