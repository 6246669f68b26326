/** `Birthday,  thanks,` → `['birthday', 'thanks']`. */
export function tagsOf(text: string): string[] {
  return [...new Set(text.split(',').map((tag) => tag.trim().toLowerCase()).filter(Boolean))];
}

/** Lines thinner than this close up when a pad is wet or the ink thick. Common practice, no source. */
const FINE_MM = 0.3;

export function fineLineWords(thinnestMm: number, shown: string): string {
  return thinnestMm < FINE_MM
    ? `Its thinnest line is ${shown}: fine. A dye or hybrid ink on a firm pad keeps such lines open; thick pigment ink fills them.`
    : `Its thinnest line is ${shown}.`;
}
