/** Usual cautions of the craft table, where the things they are about appear. General wording: the makers' instructions and local rules come first. */
export type Caution = 'magnet' | 'roller' | 'blade' | 'solvent' | 'heat';

const WORDS: Record<Caution, string> = {
  magnet: 'Small strong magnets: keep them from children and from pacemakers; a swallowed magnet needs medical help at once.',
  roller: 'Die-cutting machine: keep fingers, hair and sleeves clear of the rollers.',
  blade: 'Guillotine and knife: blade cover on when not in use, fingers behind the guard, cut away from the hand.',
  solvent: 'Solvent inks and adhesives: open a window, keep heat tools away, follow the label.',
  heat: 'Heat tool: the nozzle and the paper burn skin; put it down on its stand.',
};

export const MAKERS_FIRST = 'The makers’ instructions and local rules come first.';

export function cautionOf(kind: Caution): string {
  return WORDS[kind];
}
