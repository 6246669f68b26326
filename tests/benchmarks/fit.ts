/**
 * The fit table: 60 sentiments of about 500 points against 60 dies. CPU time of this process on the calling thread and the collector's, the less of two
 * runs; cells looked at for each fit; and what a plain grid of places would take for the same 0.02 mm, reckoned from 300 of its looks.
 */
import { borderInArea, turnedInk } from '../../server/engine/fit/border-in-area.ts';
import { fitRound } from '../../server/engine/fit/fit-pair.ts';
import { fitTable, type DieGeometry } from '../../server/engine/fit/index.ts';
import { prepareArtwork, prepareDie, turnArtwork, type PreparedArtwork, type PreparedDie } from '../../server/engine/fit/prepared.ts';
import type { Outline } from '../../server/engine/geometry/types.ts';
import { dies, sentiments } from './fit-corpus.ts';

const COUNT = 60;
const GRID_LOOKS = 300;

export async function run(_options: { json?: boolean } = {}): Promise<{ title: string; columns: string[]; rows: (string | number)[][] }> {
  const artworks = sentiments(COUNT);
  const points = artworks.reduce((sum, artwork) => sum + artwork.rings.flat().length, 0) / COUNT;
  const rows = (['convex', 'mixed', 'concave'] as const).map((which) => {
    const set = dies(COUNT, which);
    const seconds = Math.min(timed(artworks, set), timed(artworks, set));
    const { cells, widestGapMm, gridSeconds } = looks(artworks, set);
    return [`${COUNT} × ${COUNT}, ${which}`, round(seconds, 2), which === 'mixed' ? 3 : which === 'convex' ? 1 : '', round(cells, 1), round(widestGapMm, 4), which === 'convex' ? 'exact' : Math.round(gridSeconds)];
  });
  return {
    title: `Fit table, sentiments of ${Math.round(points)} points on average`,
    columns: ['table', 'seconds (cpu)', 'goal', 'cells a fit', 'widest gap to the bound, mm', 'plain grid in the not convex ones, seconds (reckoned)'],
    rows,
  };
}

function timed(artworks: Outline[], set: DieGeometry[]): number {
  const before = process.cpuUsage();
  fitTable(artworks, set);
  const used = process.cpuUsage(before);
  return (used.user + used.system) / 1e6;
}

function looks(artworks: Outline[], set: DieGeometry[]): { cells: number; widestGapMm: number; gridSeconds: number } {
  const preparedArtworks = artworks.map(prepareArtwork), preparedDies = set.map((die) => prepareDie(die));
  let cells = 0, widestGapMm = 0, gridPlaces = 0;
  for (const artwork of preparedArtworks) {
    for (const die of preparedDies) {
      const found = fitRound(artwork, die, 0);
      cells += found.cells ?? 0;
      widestGapMm = Math.max(widestGapMm, found.bound - found.border);
      if (die.concave === null) continue;
      // Places where the ink's box lies in the area's, 0.028 mm apart: none is farther than 0.02 mm from one.
      const { box } = turnArtwork(artwork, 0);
      const room = (of: number, ink: number): number => Math.max(1, (of - ink) / 0.028);
      gridPlaces += room(die.areaBox.w, box.w) * room(die.areaBox.h, box.h);
    }
  }
  const fits = artworks.length * set.length;
  return { cells: cells / fits, widestGapMm, gridSeconds: gridPlaces * secondsALook(preparedArtworks, preparedDies) };
}

function secondsALook(artworks: PreparedArtwork[], dies: PreparedDie[]): number {
  const pairs = dies.flatMap((die, i) => (die.concave ? [{ area: die.concave, box: die.areaBox, artwork: artworks[i] }] : [])).slice(0, 10);
  if (pairs.length === 0) return 0;
  const start = performance.now();
  for (const { area, box, artwork } of pairs) {
    const ink = turnedInk(artwork, turnArtwork(artwork, 0));
    for (let k = 0; k < GRID_LOOKS / pairs.length; k++) borderInArea(area, ink, box.x + box.w * (0.4 + (k % 5) / 25), box.y + box.h * (0.4 + (k % 7) / 35));
  }
  return (performance.now() - start) / 1000 / GRID_LOOKS;
}

function round(value: number, digits: number): number {
  return Number(value.toFixed(digits));
}
