/**
 * The best place of an artwork in a die, and how good it is. What the figures mean: types.ts. Lengths mm, degrees clockwise as
 * seen on the page. Pure: the same input gives the same answer on every machine. Throws on a die that cannot be drawn and on an
 * artwork without points.
 */
import type { Outline } from '../geometry/types.ts';
import { fitPair } from './fit-pair.ts';
import { prepareArtwork, prepareDie } from './prepared.ts';
import type { DieGeometry, Fit, FitOptions } from './types.ts';
import { withRoomy } from './verdict.ts';

export function bestFit(artwork: Outline, die: DieGeometry, options: FitOptions = {}): Fit {
  return fitPair(prepareArtwork(artwork), prepareDie(die), options);
}

/** Every artwork in every die: [artwork][die]. */
export function fitTable(artworks: Outline[], dies: DieGeometry[], options: FitOptions = {}): Fit[][] {
  const preparedDies = dies.map(prepareDie);
  const areasMm2 = preparedDies.map((die) => die.cutAreaMm2);
  return artworks.map((artwork) => {
    const prepared = prepareArtwork(artwork);
    return withRoomy(preparedDies.map((die) => fitPair(prepared, die, options)), areasMm2);
  });
}
