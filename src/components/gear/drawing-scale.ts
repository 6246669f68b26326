/** How gear is drawn: true to proportion, in the middle of a fixed frame of px, with room round it for marks and measures. */
export interface Frame { widthPx: number; heightPx: number; paddingPx: number }
export interface Scale { pxPerMm: number; x: (mm: number) => number; y: (mm: number) => number; size: (mm: number) => number }

/** Small in a list, where several share one scale so that a large bed looks larger; large beside a form, with its measures. */
export const CARD: Frame = { widthPx: 240, heightPx: 168, paddingPx: 20 };
export const SHEET: Frame = { widthPx: 420, heightPx: 380, paddingPx: 56 };

/** `shared`: the largest width and height among those drawn side by side. A size not yet typed counts as 100 mm, so that something is seen. */
export function scaleTo(frame: Frame, widthMm: number, heightMm: number, shared?: { widthMm: number; heightMm: number }): Scale {
  const [w, h] = [shared?.widthMm ?? widthMm, shared?.heightMm ?? heightMm].map((mm) => (mm > 0 ? mm : 100));
  const pxPerMm = Math.min((frame.widthPx - 2 * frame.paddingPx) / w, (frame.heightPx - 2 * frame.paddingPx) / h);
  const left = (frame.widthPx - widthMm * pxPerMm) / 2, top = (frame.heightPx - heightMm * pxPerMm) / 2;
  return { pxPerMm, x: (mm) => left + mm * pxPerMm, y: (mm) => top + mm * pxPerMm, size: (mm) => mm * pxPerMm };
}

export const largest = (items: readonly { widthMm: number; heightMm: number }[]) => ({
  widthMm: Math.max(1, ...items.map((item) => item.widthMm)),
  heightMm: Math.max(1, ...items.map((item) => item.heightMm)),
});
