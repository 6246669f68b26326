/** How rows of sentiments follow a reading, without a database. */
import { describe, expect, it } from 'vitest';
import type { Reading, ReadPart, ReadSentiment } from '../../server/engine/reading/types.ts';
import { fittingCorrections, flipWishes, followReading, resizeWishes, setUpright } from '../../server/features/stamp-sets/sentiment-follow.ts';
import type { Wishes } from '../../server/features/stamp-sets/sentiment-follow.ts';

const PICTURE = { widthPx: 1000, heightPx: 500 };
const rectangle = (w: number, h: number) => ({ rings: [[{ x: 0, y: 0 }, { x: w, y: 0 }, { x: w, y: h }, { x: 0, y: h }]] });
function sentiment(id: number, x: number, y: number, w: number, h: number): ReadSentiment {
  return { partIds: [id], boxPx: { x, y, w, h }, widthMm: w / 10, heightMm: h / 10, angleDeg: 0, outline: rectangle(w / 10, h / 10), inkAreaMm2: 1, thinnestStrokeMm: 0.4 };
}
const share = (x: number, y: number, w: number, h: number) => ({ x: x / 1000, y: y / 500, w: w / 1000, h: h / 500 });
const row = (id: string, place: ReturnType<typeof share>, present = true) => ({ id, place, present, uprightDeg: null });
const follow = (sentiments: ReadSentiment[], known: ReturnType<typeof row>[], aside: ReadSentiment[] = []) => followReading({ ...PICTURE, sentiments, aside }, known);

describe('rows that follow a reading', () => {
  const thanks = row('thanks', share(100, 50, 300, 60)), hello = row('hello', share(420, 50, 120, 60));

  it('stay with their ink in whatever order it is read', () => {
    expect(follow([sentiment(2, 420, 50, 120, 60), sentiment(1, 100, 50, 300, 60)], [thanks, hello]).map(({ id, number }) => [id, number])).toEqual([['hello', 1], ['thanks', 2]]);
  });
  it('give a joined sentiment to its larger half, and both their own again when the join is undone', () => {
    const joined = follow([sentiment(1, 100, 50, 440, 60)], [thanks, hello]);
    expect(joined.map(({ id }) => id)).toEqual(['thanks']);
    // As stored then: one row over both places, the other hidden.
    const stored = [row('thanks', share(100, 50, 440, 60)), row('hello', share(420, 50, 120, 60), false)];
    expect(follow([sentiment(1, 100, 50, 300, 60), sentiment(2, 420, 50, 120, 60)], stored).map(({ id }) => id)).toEqual(['thanks', 'hello']);
  });
  it('are new where nothing stood before, and come back after long only where the ink is nearly the same', () => {
    expect(follow([sentiment(3, 700, 300, 100, 50)], [thanks, hello])[0].id).toBeNull();
    const hidden = row('old', share(700, 300, 100, 50), false);
    expect(follow([sentiment(3, 702, 301, 98, 49)], [hidden])[0].id).toBe('old');
    expect(follow([sentiment(3, 740, 300, 100, 50)], [hidden])[0].id).toBeNull();
  });
  it('keep those that are set aside, after the others', () => {
    expect(follow([sentiment(2, 420, 50, 120, 60)], [thanks, hello], [sentiment(1, 100, 50, 300, 60)]).map(({ id, setAside, number }) => [id, setAside, number])).toEqual([['hello', false, 1], ['thanks', true, 2]]);
  });
  it('stand upright by the angle that the person chose', () => {
    const [turned] = followReading({ ...PICTURE, sentiments: [sentiment(1, 100, 50, 300, 60)], aside: [] }, [{ ...thanks, uprightDeg: 90 }]);
    expect([turned.widthMm, turned.heightMm]).toEqual([6, 30]);
  });
});

it('an outline set upright by 30° has the box of the turned rectangle (by hand: w cos + h sin)', () => {
  const { widthMm, heightMm } = setUpright(rectangle(40, 10), 30);
  expect(widthMm).toBeCloseTo(40 * Math.cos(Math.PI / 6) + 10 * 0.5, 2);
  expect(heightMm).toBeCloseTo(40 * 0.5 + 10 * Math.cos(Math.PI / 6), 2);
});

describe('wishes that move with their picture', () => {
  const p = (x: number, y: number) => ({ x, y });
  const wishes: Wishes = {
    scale: { kind: 'sheet', cornersPx: [p(10, 10), p(990, 20), p(980, 480), p(20, 490)], widthMm: 200, heightMm: 100 },
    groupingGap: 3, corrections: { joins: [[p(100, 60), p(450, 60)]], splits: [{ from: p(300, 0), to: p(300, 100) }], setAside: [p(700, 320)] },
  };
  it('are the same after two flips, and name the corners as they are read', () => {
    const flipped = flipWishes(wishes, 1000);
    expect(flipped.scale).toMatchObject({ cornersPx: [p(10, 20), p(990, 10), p(980, 490), p(20, 480)] });
    expect(flipped.corrections.setAside).toEqual([p(300, 320)]);
    expect(flipWishes(flipped, 1000)).toEqual(wishes);
  });
  it('grow with a finer picture, whose own density counts then', () => {
    const grown = resizeWishes(wishes, PICTURE, { widthPx: 2000, heightPx: 1000 });
    expect(grown.corrections.splits).toEqual([{ from: p(600, 0), to: p(600, 200) }]);
    expect(grown.scale).toEqual({ kind: 'file' });
    expect(resizeWishes(wishes, PICTURE, PICTURE)).toEqual(wishes);
  });
  it('are dropped where they meet no ink any more', () => {
    const part = (id: number, x: number, y: number, w: number, h: number) => ({ id, boxPx: { x, y, w, h } }) as ReadPart;
    const reading = { ...PICTURE, parts: [part(1, 100, 50, 300, 60), part(2, 420, 50, 120, 60)], sentiments: [sentiment(1, 100, 50, 300, 60), sentiment(2, 420, 50, 120, 60)] } as Reading;
    expect(fittingCorrections(wishes.corrections, reading)).toEqual({ ...wishes.corrections, setAside: [] });
    expect(fittingCorrections({ joins: [[p(100, 60), p(900, 450)]], splits: [{ from: p(0, 400), to: p(900, 480) }], setAside: [] }, reading)).toEqual({ joins: [], splits: [], setAside: [] });
  });
});
