/** A reading as it is kept: the same, with places rounded, since sixteen digits a coordinate would be most of its bytes. */
import { mapOutline } from '../../engine/geometry/transform.ts';
import type { Reading } from '../../engine/reading/types.ts';

/** A hundredth of a pixel is 1 µm at 300 dpi, far below what ink shows. */
const PX = 100;
/** A micrometre. */
const MM = 1000;

export function storedReading(reading: Reading): Reading {
  const to = (scale: number) => (value: number) => Math.round(value * scale) / scale;
  const px = to(PX), mm = to(MM);
  return {
    ...reading,
    parts: reading.parts.map((part) => ({ ...part, outlinePx: mapOutline(part.outlinePx, (p) => ({ x: px(p.x), y: px(p.y) })) })),
    sentiments: reading.sentiments.map((sentiment) => ({ ...sentiment, outline: sentiment.outline && mapOutline(sentiment.outline, (p) => ({ x: mm(p.x), y: mm(p.y) })) })),
  };
}
