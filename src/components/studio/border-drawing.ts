/**
 * Numbers of the drawing that shows what the verdict limits mean: two labels 44 × 20 mm with the same ink, in one the border at
 * "good", in the other at "snug". All in mm of the drawing; limits beyond what fits the label are drawn at its middle.
 */
export interface BorderCase { kind: 'good' | 'snug'; x: number; ink: { x: number; y: number; w: number; h: number }; border: number }

const LABEL = { w: 44, h: 20, gap: 12 };
export const VIEW = { w: LABEL.w * 2 + LABEL.gap + 2, h: LABEL.h + 2 };
export const LABEL_SIZE = { w: LABEL.w, h: LABEL.h };

export function borderCases(goodMm: number | null, snugMm: number | null): BorderCase[] {
  return ([['good', goodMm], ['snug', snugMm]] as const).map(([kind, mm], i) => {
    const border = Math.min(Math.max(mm ?? 0, 0), LABEL.h / 2 - 1);
    return { kind, border, x: 1 + i * (LABEL.w + LABEL.gap), ink: { x: border, y: border, w: LABEL.w - 2 * border, h: LABEL.h - 2 * border } };
  });
}
