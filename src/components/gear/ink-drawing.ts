/** Numbers of an ink's drawing: 1 mm is 3 px; a clearance beyond what fits is drawn as far as the frame goes. */
export const INK_FRAME = { widthPx: 240, heightPx: 168 };
const PX_PER_MM = 3;
const PAD = { x: 20, y: 28, w: 96, h: 92 };
const INK_RIGHT = 88;
const NEIGHBOUR_WIDTH = 44;

export function drawInk(clearMm: number, measured: boolean) {
  const from = INK_RIGHT;
  const to = Math.min(from + Math.max(0, clearMm) * PX_PER_MM, INK_FRAME.widthPx - NEIGHBOUR_WIDTH - 14);
  return {
    pad: PAD,
    inked: `M44 64H${INK_RIGHT - 3}M52 84H${INK_RIGHT - 10}`,
    neighbour: `M${to + 4} 64h${NEIGHBOUR_WIDTH}M${to + 9} 84h${NEIGHBOUR_WIDTH - 14}`,
    gap: measured && to - from > 2 ? { from, to, y: 144, guides: `M${from} 80V150M${to} 80V150` } : null,
  };
}
