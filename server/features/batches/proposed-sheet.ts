/**
 * The run sheet that a new batch begins with: the cardstock as it is, or halved until it lies in the platform. Lengths mm. Only a
 * proposal; the person types another. Without a cardstock it is the platform's bed, without that a half of a letter sheet.
 */
interface Size { widthMm: number; heightMm: number }

/** 5 1/2 × 8 1/2 in, common practice for card panels; no source. */
const HALF_LETTER: Size = { widthMm: 139.7, heightMm: 215.9 };
/** Halving goes on until the sheet lies in the bed; four times is a sixteenth, smaller than any label needs. */
const MAX_HALVINGS = 4;

export function proposedSheet(bed: Size | null, stock: Size | null): Size {
  if (!bed) return stock ? { widthMm: stock.widthMm, heightMm: stock.heightMm } : HALF_LETTER;
  if (!stock) return { widthMm: bed.widthMm, heightMm: bed.heightMm };
  let [shorter, longer] = [stock.widthMm, stock.heightMm].sort((a, b) => a - b);
  for (let i = 0; i < MAX_HALVINGS && !liesIn(bed, shorter, longer); i += 1) [shorter, longer] = [shorter, longer / 2].sort((a, b) => a - b);
  return bed.widthMm > bed.heightMm ? { widthMm: longer, heightMm: shorter } : { widthMm: shorter, heightMm: longer };
}

/** Some hundredths over are rounding of sizes in inches. */
const ROUNDING_MM = 0.05;
function liesIn(bed: Size, shorter: number, longer: number): boolean {
  const [bedShorter, bedLonger] = [bed.widthMm, bed.heightMm].sort((a, b) => a - b);
  return shorter <= bedShorter + ROUNDING_MM && longer <= bedLonger + ROUNDING_MM;
}
