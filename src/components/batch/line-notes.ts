/** What a person should know of a label before it is planned. Pure. */
import type { BatchLine } from '../../api/batches.ts';

export function lineNotes(line: BatchLine): string[] {
  const { pieces } = line;
  return [
    ...(pieces.some(({ gone }) => gone) ? ['A stamp of it is in the bin or set aside.'] : []),
    ...(pieces.some(({ mount }) => mount === 'wood') ? ['Mounted on wood: it cannot hang on the lid and is left out of the plan.'] : []),
    ...(pieces.some(({ widthMm }) => widthMm === null) ? ['Its size is not known yet: its picture has no scale.'] : []),
    ...(pieces.some(({ owned }) => owned === 0) ? ['None is owned.'] : []),
    ...(new Set(pieces.map(({ sentimentId }) => sentimentId)).size < pieces.length ? ['The same stamp twice: two copies are needed.'] : []),
  ];
}
