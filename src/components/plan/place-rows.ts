/** The places of a setup as a list beside its drawing. Pure. */
import type { PlanNames } from '../../api/batches.ts';
import type { Setup } from '../../../server/engine/gangrun/types.ts';

export interface PlaceRow { number: number; id: number; title: string; made: string[]; x: number; y: number; turnDeg: number }

export function placeRows(setup: Pick<Setup, 'placements' | 'presses'>, names: PlanNames): PlaceRow[] {
  const made = new Map<string, number>();
  for (const { placement, lineId } of setup.presses.flatMap((press) => press.inked)) made.set(`${placement}/${lineId}`, (made.get(`${placement}/${lineId}`) ?? 0) + 1);
  return setup.placements.map((placement, i) => {
    const titles = [...new Set(placement.lineIds.map((id) => names.lines[id]?.title ?? 'Label'))];
    const counts = placement.lineIds.map((id) => made.get(`${placement.id}/${id}`) ?? 0);
    return {
      number: i + 1, id: placement.id, title: titles.join(', '), x: placement.x, y: placement.y, turnDeg: ((Math.round(placement.rotationDeg * 100) / 100 + 540) % 360) - 180,
      made: placement.lineIds.length > 1 ? counts.map((n, k) => `${n} of label ${k + 1}`) : [`${counts[0]} made`],
    };
  });
}
