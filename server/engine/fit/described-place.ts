/** A place in words and figures for a person: what bestFit answers with, whoever found the place. */
import type { Place } from './convex-fit.ts';
import type { PreparedDie, TurnedArtwork } from './prepared.ts';
import type { Fit, FitOptions } from './types.ts';
import { fitsWith, verdictOf } from './verdict.ts';

/** A fit without a proof: the place was chosen, not searched for. */
export type PlacedFit = Omit<Fit, 'boundMm'>;

export function describedPlace(die: PreparedDie, artwork: TurnedArtwork, place: Place, limits: Pick<FitOptions, 'goodMm' | 'snugMm'>): PlacedFit {
  const { box, angleDeg } = artwork;
  const area = die.areaBox;
  const borderMm = place.border + die.shiftMm;
  return {
    fits: !die.nothingUsable && fitsWith(borderMm),
    borderMm,
    centre: { x: place.x, y: place.y },
    rotationDeg: angleDeg,
    margins: {
      left: place.x + box.x - area.x, right: area.x + area.w - (place.x + box.x + box.w),
      top: place.y + box.y - area.y, bottom: area.y + area.h - (place.y + box.y + box.h),
    },
    verdict: die.nothingUsable ? 'no' : verdictOf(borderMm, limits),
  };
}
