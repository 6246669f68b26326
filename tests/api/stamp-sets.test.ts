import { deflateSync } from 'node:zlib';
import supertest from 'supertest';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Picture, Sentiment, StampSet } from '../../server/contract/stamp-sets.ts';
import { openKit } from './kit.ts';
import type { Agent, Kit } from './kit.ts';
import { drawSheet } from './stamp-sheet.ts';

const SETS = '/studios/:studioId/stamp-sets';
const NONE = { joins: [], splits: [], setAside: [] };
/** Three lines far apart, and a pair of words with a gap between them that is wider than a word's. */
const WORDS = [
  { words: 'thank you', x: 8, y: 18, sizeMm: 9 },
  { words: 'hello', x: 8, y: 45, sizeMm: 9, font: 'quicksand' },
  { words: 'with love', x: 55, y: 72, sizeMm: 8, font: 'lora' },
];
const PAGE = { widthMm: 110, heightMm: 85, dpi: 300 };

let kit: Kit, maker: Agent;
beforeAll(async () => {
  kit = await openKit({ jobs: true });
  maker = await kit.signIn('maker');
});
afterAll(() => kit.close());

async function readSet(png: Uint8Array, fields: Record<string, string> = {}): Promise<StampSet> {
  const made = await maker.upload(`${SETS}/from-picture`, { field: 'picture', bytes: png, name: 'my scan.png' }, { name: 'Kind words', ...fields }).expect(202);
  const ended = await kit.jobEnded(maker, made.body.pictures[0].jobId, 60_000);
  expect(ended.error).toBeNull();
  return (await maker.get(`${SETS}/${made.body.id}`).expect(200)).body;
}
const correct = (set: StampSet, change: object, agent = maker) => {
  const { id, version, scale, groupingGap, corrections } = set.pictures[0];
  return agent.put(`${SETS}/${set.id}/pictures/${id}/corrections`, { version, scale, groupingGap, corrections, ...change });
};
/** Middle of a sentiment in picture px. */
const middle = (picture: Picture, { place }: Sentiment) => ({ x: (place!.x + place!.w / 2) * picture.widthPx, y: (place!.y + place!.h / 2) * picture.heightPx });
const byPlace = (sentiments: Sentiment[]) => sentiments.filter((s) => !s.setAside).sort((a, b) => a.place!.y - b.place!.y);

describe('a stamp set from a scan', () => {
  const sheet = drawSheet(WORDS, PAGE);
  let set: StampSet;
  beforeAll(async () => {
    set = await readSet(sheet.png, { mount: 'cling', storagePlace: 'Drawer 2' });
  }, 90_000);

  it('is read with every sentiment in true size (boxes of the font\'s own outlines, opentype.js)', () => {
    expect(set).toMatchObject({ name: 'Kind words', mount: 'cling', storagePlace: 'Drawer 2' });
    expect(set.pictures[0]).toMatchObject({ state: 'read', fileName: 'my scan.png', widthPx: 1299, scale: { kind: 'file' }, groupingGap: 'auto' });
    const found = byPlace(set.sentiments);
    expect(found).toHaveLength(3);
    found.forEach((sentiment, i) => {
      expect(Math.abs(sentiment.widthMm! - sheet.boxesMm[i].w), WORDS[i].words).toBeLessThan(0.15);
      expect(Math.abs(sentiment.heightMm! - sheet.boxesMm[i].h), WORDS[i].words).toBeLessThan(0.15);
    });
    expect(found.map(({ number }) => number)).toEqual([1, 2, 3]);
  });

  it('shows its picture as JPEG, kept by its key, and its outlines as drawings', async () => {
    const { id, imageKey } = set.pictures[0];
    const image = await maker.get(`${SETS}/${set.id}/pictures/${id}/image?size=view&key=${imageKey}`).expect(200).expect('Content-Type', /image\/jpeg/);
    expect([...(image.body as Buffer).subarray(0, 3)]).toEqual([0xff, 0xd8, 0xff]);
    expect(image.headers['cache-control']).toMatch(/max-age/);
    const drawing = await maker.get(`/studios/:studioId/sentiments/${set.sentiments[0].id}/drawing`).expect(200).expect('Content-Type', /svg/);
    const [, w, h] = /width="([\d.]+)mm" height="([\d.]+)mm"/.exec((drawing.body as Buffer).toString())!;
    expect(Number(w) / Number(h)).toBeCloseTo((set.sentiments[0].widthMm! * 1.04) / (set.sentiments[0].heightMm! + 0.04 * set.sentiments[0].widthMm!), 1);
  });

  it('keeps a sentiment\'s words and id while it is joined, cut apart and taken back', async () => {
    const [thanks, hello] = byPlace(set.sentiments);
    await maker.patch(`/studios/:studioId/sentiments/${hello.id}`, { version: hello.version, words: 'hello', tags: ['Everyday', 'everyday'] }).expect(200);
    const picture = set.pictures[0];
    const points = [thanks, hello].map((s) => nearInk(s, picture));
    const joined = (await correct(set, { corrections: { ...NONE, joins: [points] } }).expect(200)).body;
    expect(joined.sentiments).toHaveLength(2);
    expect(joined.sentiments.map((s: Sentiment) => s.id)).toContain(thanks.id);
    const undone = (await correct({ ...set, pictures: [joined.picture] }, { corrections: NONE }).expect(200)).body;
    expect(undone.sentiments).toHaveLength(3);
    expect(undone.sentiments.find((s: Sentiment) => s.id === hello.id)).toMatchObject({ words: 'hello', tags: ['everyday'], widthMm: hello.widthMm });

    // Between the two words, where the font's own outlines say that the first one ends.
    const [first] = drawSheet([{ ...WORDS[0], words: 'thank' }], PAGE).boxesMm;
    const x = ((first.x + first.w + 0.8) / 25.4) * PAGE.dpi, y = middle(picture, thanks).y;
    const cut = (await correct({ ...set, pictures: [undone.picture] }, { corrections: { ...NONE, splits: [{ from: { x, y: y - 120 }, to: { x, y: y + 120 } }] } }).expect(200)).body;
    expect(cut.sentiments).toHaveLength(4);
    const aside = (await correct({ ...set, pictures: [cut.picture] }, { corrections: { ...NONE, setAside: [nearInk(hello, picture)] } }).expect(200)).body;
    const back = (await correct({ ...set, pictures: [aside.picture] }, { corrections: NONE }).expect(200)).body;
    expect(back.sentiments.find((s: Sentiment) => s.id === hello.id)).toMatchObject({ words: 'hello', setAside: false });
    set = (await maker.get(`${SETS}/${set.id}`)).body;
  });

  it('measures anew by a ruler, and says so to whoever still has the former version', async () => {
    const before = byPlace(set.sentiments)[0].widthMm!;
    const half = { kind: 'ruler', from: { x: 0, y: 10 }, to: { x: 600, y: 10 }, lengthMm: 25.4 };
    const ruled = (await correct(set, { scale: half }).expect(200)).body;
    expect(byPlace(ruled.sentiments)[0].widthMm! / before).toBeCloseTo(0.5, 2);
    const late = await correct(set, { scale: { kind: 'file' } }).expect(409);
    expect(late.body).toMatchObject({ code: 'stale', current: { scale: half, version: ruled.picture.version } });
    set = (await maker.get(`${SETS}/${set.id}`)).body;
    expect(set.pictures[0].scale).toEqual(half);
  });

  it('refuses corners that do not go round and a ruler of no length', async () => {
    const p = (x: number, y: number) => ({ x, y });
    await correct(set, { scale: { kind: 'sheet', cornersPx: [p(0, 0), p(100, 100), p(100, 0), p(0, 100)], widthMm: 100, heightMm: 100 } }).expect(400);
    await correct(set, { scale: { kind: 'ruler', from: p(5, 5), to: p(5, 5), lengthMm: 10 } }).expect(400);
  });

  it('turns a sentiment upright by the angle chosen, and back', async () => {
    const [first] = byPlace(set.sentiments);
    const turned = (await maker.patch(`/studios/:studioId/sentiments/${first.id}`, { version: first.version, uprightDeg: first.angleDeg + 90 }).expect(200)).body as Sentiment;
    expect(turned.widthMm).toBeCloseTo(first.heightMm!, 1);
    const back = (await maker.patch(`/studios/:studioId/sentiments/${first.id}`, { version: turned.version, uprightDeg: null }).expect(200)).body as Sentiment;
    expect(back.widthMm).toBeCloseTo(first.widthMm!, 1);
  });

  it('is flipped when it shows the stamps\' own faces: corrections go along', async () => {
    const mirrored = await readSet(drawSheet(WORDS, { ...PAGE, mirrored: true }).png);
    const away = byPlace(mirrored.sentiments)[2], picture = mirrored.pictures[0];
    const place = nearInk(byPlace(mirrored.sentiments)[0], picture);
    const aside = (await correct(mirrored, { corrections: { ...NONE, setAside: [place] } }).expect(200)).body;
    const { body } = await maker.post(`${SETS}/${mirrored.id}/pictures/${picture.id}/read`, { version: aside.picture.version, mirrored: true }).expect(202);
    expect((await kit.jobEnded(maker, body.jobId, 60_000)).state).toBe('done');
    const flipped: StampSet = (await maker.get(`${SETS}/${mirrored.id}`)).body;
    expect(flipped.pictures[0]).toMatchObject({ mirrored: true, corrections: { setAside: [{ x: expect.closeTo(picture.widthPx - place.x, 6), y: place.y }] } });
    const last = byPlace(flipped.sentiments).at(-1)!;
    expect(last.place!.x + last.place!.w).toBeCloseTo(1 - away.place!.x, 2);
  }, 90_000);
});

describe('words', () => {
  it('are proposed after a reading with their occasions, never over what a person wrote, and tell a picture of the stamps\' faces', async () => {
    const set = await readSet(drawSheet(WORDS, { ...PAGE, mirrored: true }).png, { mirrored: 'true' });
    // The reading itself queued the recognition; asking again meets the same job.
    const [first] = byPlace(set.sentiments);
    await maker.patch(`/studios/:studioId/sentiments/${first.id}`, { version: first.version, words: 'my own words' }).expect(200);
    const { body } = await maker.post(`${SETS}/${set.id}/pictures/${set.pictures[0].id}/words`).expect(202);
    expect((await kit.jobEnded(maker, body.jobId, 90_000)).error).toBeNull();
    const after: StampSet = (await maker.get(`${SETS}/${set.id}`)).body;
    const found = byPlace(after.sentiments);
    expect(found[0]).toMatchObject({ words: 'my own words', wordsBy: 'person' });
    expect(found[2]).toMatchObject({ words: expect.stringMatching(/with love/i), wordsBy: 'recognised', tags: expect.arrayContaining(['love']), title: expect.stringMatching(/with love/i) });
    expect(after.pictures[0].looksMirrored).toBe(false);

    const unflipped = await readSet(drawSheet(WORDS, { ...PAGE, mirrored: true }).png);
    const again = await maker.post(`${SETS}/${unflipped.id}/pictures/${unflipped.pictures[0].id}/words`).expect(202);
    await kit.jobEnded(maker, again.body.jobId, 90_000);
    expect((await maker.get(`${SETS}/${unflipped.id}`)).body.pictures[0].looksMirrored).toBe(true);
  }, 200_000);
});

function nearInk(sentiment: Sentiment, picture: Picture) {
  return middle(picture, sentiment);
}

describe('files that cannot be read', () => {
  const hugePng = () => {
    const chunk = (name: string, body: Buffer) => Buffer.concat([Buffer.from([0, 0, 0, body.length]), Buffer.from(name, 'latin1'), body, Buffer.alloc(4)]);
    const header = Buffer.alloc(13);
    header.writeUInt32BE(12_000, 0);
    header.writeUInt32BE(12_000, 4);
    return Buffer.concat([Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]), chunk('IHDR', header), chunk('IDAT', deflateSync(Buffer.alloc(10)))]);
  };
  it.each([
    ['foreign', Buffer.from('%PDF-1.7 not a picture'), 415, 'unsupported-type', /PNG, JPEG/],
    ['huge', hugePng(), 413, 'too-large', /144|million|pixels/],
    ['broken off in its header', drawSheet([], { widthMm: 20, heightMm: 20, dpi: 100 }).png.subarray(0, 20), 422, 'damaged', /damaged/],
    ['empty', Buffer.alloc(0), 400, 'no-file', /empty/],
  ])('%s: told at once, and no set is made', async (name, bytes, status, code, words) => {
    const started = Date.now();
    const answer = await maker.upload(`${SETS}/from-picture`, { field: 'picture', bytes, name: 'x.png' }, { name: `Set ${name}` }).expect(status);
    expect(answer.body).toMatchObject({ code });
    expect(answer.body.detail).toMatch(words);
    expect(Date.now() - started).toBeLessThan(2000);
    expect((await maker.get(`${SETS}?search=Set ${name}`)).body.total).toBe(0);
  });

  it.each([
    ['inkless', drawSheet([], { widthMm: 60, heightMm: 60, dpi: 200 }).png, 'no-ink'],
    ['damaged behind a sound header', (() => { const { png } = drawSheet(WORDS, PAGE); return png.subarray(0, Math.floor(png.length / 2)); })(), 'damaged'],
  ])('%s: the set stays, says why, and takes another picture', async (_name, bytes, code) => {
    const made = (await maker.upload(`${SETS}/from-picture`, { field: 'picture', bytes, name: 'x.png' }, { name: 'To be mended' }).expect(202)).body as StampSet;
    const ended = await kit.jobEnded(maker, made.pictures[0].jobId!, 60_000);
    expect(ended).toMatchObject({ state: 'failed', error: { code } });
    const failed: StampSet = (await maker.get(`${SETS}/${made.id}`)).body;
    expect(failed.pictures[0]).toMatchObject({ state: 'failed', error: { code } });
    const replaced = await supertest(kit.url).put(`/api/studios/${kit.studioId}/stamp-sets/${made.id}/pictures/${made.pictures[0].id}`)
      .set('Cookie', maker.cookie).set('X-CSRF-Token', maker.csrfToken).field('version', String(failed.pictures[0].version)).attach('picture', drawSheet(WORDS, PAGE).png, 'better.png').expect(202);
    expect((await kit.jobEnded(maker, replaced.body.jobId, 60_000)).state).toBe('done');
    expect(byPlace((await maker.get(`${SETS}/${made.id}`)).body.sentiments)).toHaveLength(3);
  }, 90_000);
});

describe('a picture without a scale', () => {
  it('gives sentiments without sizes, until the scale is typed', async () => {
    const sheet = drawSheet(WORDS, { ...PAGE, statedDpi: null });
    const set = await readSet(sheet.png);
    expect(set.sentiments.map((s) => s.widthMm)).toEqual([null, null, null]);
    const sized = (await correct(set, { scale: { kind: 'typed', dpi: 300 } }).expect(200)).body;
    expect(Math.abs(byPlace(sized.sentiments)[0].widthMm! - sheet.boxesMm[0].w)).toBeLessThan(0.15);
  }, 90_000);

  it('a cleaner picture of the same sheet keeps names and corrections, at another resolution too', async () => {
    const set = await readSet(drawSheet(WORDS, PAGE).png);
    const [first, second] = byPlace(set.sentiments);
    await maker.patch(`/studios/:studioId/sentiments/${second.id}`, { version: second.version, name: 'Greeting' }).expect(200);
    const joined = (await correct(set, { corrections: { ...NONE, joins: [[nearInk(first, set.pictures[0]), nearInk(byPlace(set.sentiments)[2], set.pictures[0])]] } }).expect(200)).body;
    expect(joined.sentiments).toHaveLength(2);
    const finer = drawSheet(WORDS, { ...PAGE, dpi: 600 });
    const replaced = await supertest(kit.url).put(`/api/studios/${kit.studioId}/stamp-sets/${set.id}/pictures/${set.pictures[0].id}`)
      .set('Cookie', maker.cookie).set('X-CSRF-Token', maker.csrfToken).field('version', String(joined.picture.version)).attach('picture', finer.png, 'finer.png').expect(202);
    expect((await kit.jobEnded(maker, replaced.body.jobId, 60_000)).error).toBeNull();
    const after: StampSet = (await maker.get(`${SETS}/${set.id}`)).body;
    expect(after.sentiments).toHaveLength(2);
    expect(after.sentiments.find((s) => s.id === second.id)).toMatchObject({ name: 'Greeting', title: 'Greeting' });
  }, 90_000);
});

describe('sentiments without a picture, lists and the bin', () => {
  it('a typed sentiment is a rectangle with words; only its size can be typed again', async () => {
    const set = (await maker.post(SETS, { name: 'Typed set' }).expect(201)).body as StampSet;
    const typed = (await maker.post(`${SETS}/${set.id}/sentiments`, { words: 'happy birthday', widthMm: 60, heightMm: 14 }).expect(201)).body as Sentiment;
    expect(typed).toMatchObject({ title: 'happy birthday', outlined: false, pictureId: null, widthMm: 60, heightMm: 14, owned: 1 });
    const wider = (await maker.patch(`/studios/:studioId/sentiments/${typed.id}`, { version: 1, widthMm: 70 }).expect(200)).body;
    expect(wider).toMatchObject({ widthMm: 70, heightMm: 14, version: 2 });
    const stale = await maker.patch(`/studios/:studioId/sentiments/${typed.id}`, { version: 1, name: 'late' }).expect(409);
    expect(stale.body.current).toMatchObject({ version: 2, widthMm: 70 });
    await maker.delete(`/studios/:studioId/sentiments/${typed.id}`).expect(204);
    expect((await maker.get(`${SETS}/${set.id}`)).body.sentiments).toEqual([]);
    await maker.post(`/studios/:studioId/sentiments/${typed.id}/restore`).expect(200);
    expect((await maker.get(`/studios/:studioId/sentiments/${typed.id}`)).body.artwork.rings[0]).toHaveLength(4);
  });

  it('finds sets by words and tags, whole pages in order, and keeps a deleted one for bringing back', async () => {
    const owner = await kit.makePerson();
    const studio = await kit.makeStudio(owner), agent = await kit.signInAs(owner, studio);
    for (const [name, words, tag] of [['Autumn', 'so grateful for you', 'thanks'], ['Birthdays', '100% fun', 'birthday'], ['Comfort', 'thinking of you', 'sympathy']]) {
      const set = (await agent.post(SETS, { name })).body;
      await agent.post(`${SETS}/${set.id}/sentiments`, { words, tags: [tag], widthMm: 50, heightMm: 10 }).expect(201);
    }
    const names = async (query: string) => (await agent.get(`${SETS}?${query}`).expect(200)).body.items.map((item: { name: string }) => item.name);
    expect(await names('search=OF YOU')).toEqual(['Comfort']);
    expect(await names('search=birthday')).toEqual(['Birthdays']);
    expect(await names('search=0%25')).toEqual(['Birthdays']);
    expect(await names('search=_')).toEqual([]);
    expect(await names('tag=thanks')).toEqual(['Autumn']);
    const first = (await agent.get(`${SETS}?limit=2&sort=-name`)).body;
    expect(first).toMatchObject({ total: 3, items: [{ name: 'Comfort' }, { name: 'Birthdays' }] });
    expect(await names(`limit=2&sort=-name&cursor=${first.next}`)).toEqual(['Autumn']);
    await agent.get(`${SETS}?cursor=${first.next}`).expect(400);

    const [{ id }] = (await agent.get(`${SETS}?search=Autumn`)).body.items;
    await agent.delete(`${SETS}/${id}`).expect(204);
    await agent.get(`${SETS}/${id}`).expect(404);
    expect((await agent.get(`/studios/:studioId/sentiments?search=grateful`)).body.total).toBe(0);
    expect(await names('bin=true')).toEqual(['Autumn']);
    expect((await agent.post(`${SETS}/${id}/restore`).expect(200)).body.sentiments).toHaveLength(1);
  });

  it('a helper sees and may not change; another studio does not even see', async () => {
    const set = (await maker.post(SETS, { name: 'Ours' })).body;
    const helper = await kit.signIn('helper');
    await helper.get(`${SETS}/${set.id}`).expect(200);
    expect((await helper.patch(`${SETS}/${set.id}`, { version: 1, name: 'Mine' }).expect(403)).body.code).toBe('forbidden');
    const other = await kit.makePerson();
    const elsewhere = await kit.signInAs(other, await kit.makeStudio(other));
    await elsewhere.get(`${SETS}/${set.id}`).expect(404);
    await elsewhere.post(`${SETS}/${set.id}/sentiments`, { widthMm: 10, heightMm: 10 }).expect(404);
  });
});
