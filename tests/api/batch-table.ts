/** A studio's table for batch tests: stamps by their sizes, a nested set of dies, a platform, two inks, a cardstock. All invented. */
import type { Agent } from './kit.ts';

export interface Table {
  sentiments: Record<string, string>;
  wooden: string;
  dies: { id: string; name: string; widthMm: number }[];
  platformId: string;
  inks: { blue: string; black: string };
  cardstocks: { white: string; kraft: string };
}

/** Width × height, mm. */
export const STAMPS: Record<string, [number, number]> = { 'Happy birthday': [62, 14], 'Thank you': [40, 12], 'With love': [36, 10], Hello: [24, 12], 'Just a note': [52, 9], Congratulations: [70, 11] };

export async function layTable(maker: Agent): Promise<Table> {
  const set = (await maker.post('/studios/:studioId/stamp-sets', { name: 'Plain greetings' }).expect(201)).body;
  const sentiments: Record<string, string> = {};
  for (const [name, [widthMm, heightMm]] of Object.entries(STAMPS)) {
    sentiments[name] = (await maker.post(`/studios/:studioId/stamp-sets/${set.id}/sentiments`, { name, words: name, widthMm, heightMm }).expect(201)).body.id;
  }
  const woodSet = (await maker.post('/studios/:studioId/stamp-sets', { name: 'Old blocks', mount: 'wood' }).expect(201)).body;
  const wooden = (await maker.post(`/studios/:studioId/stamp-sets/${woodSet.id}/sentiments`, { name: 'Best wishes', widthMm: 44, heightMm: 12 }).expect(201)).body.id;
  const dieSet = (await maker.post('/studios/:studioId/die-sets', {
    name: 'Nested rectangles',
    dies: [[85, 34], [70, 28], [55, 22]].map(([widthMm, heightMm]) => ({ geometry: { shape: { kind: 'rectangle', widthMm, heightMm, cornerRadiusMm: 2 }, rimMm: 1.5 } })),
  }).expect(201)).body;
  const platform = (await maker.post('/studios/:studioId/platforms', { name: 'Table press', widthMm: 160, heightMm: 170 }).expect(201)).body;
  const ink = async (name: string, colour: string) => (await maker.post('/studios/:studioId/inks', { name, colour, kind: 'dye', clearMm: 5 }).expect(201)).body.id;
  const stock = async (name: string, colour: string) => (await maker.post('/studios/:studioId/cardstocks', { name, colour, widthMm: 215.9, heightMm: 279.4, onHand: 20 }).expect(201)).body.id;
  return {
    sentiments, wooden, dies: dieSet.dies, platformId: platform.id,
    inks: { blue: await ink('Night blue', '#22304A'), black: await ink('Coal', '#111111') }, cardstocks: { white: await stock('Smooth white', '#FFFFFF'), kraft: await stock('Brown wrap', '#B58A5B') },
  };
}

export async function beginBatch(maker: Agent, name: string, more: object = {}) {
  return (await maker.post('/studios/:studioId/batches', { name, designs: 1, people: 12, ...more }).expect(201)).body;
}
