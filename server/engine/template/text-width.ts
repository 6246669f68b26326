/**
 * How wide words are in Work Sans, to break lines and to keep words inside their columns where no font is at hand.
 *
 * Advance widths in thousandths of the size, as the font's own hmtx table has them (Work Sans 400 and 600, characters 32 to 126). Other
 * characters count as a wide letter, so that a line is rather broken early. No kerning: it only makes text narrower.
 */
const FIRST = 32;
const REGULAR = [341, 272, 403, 639, 622, 856, 623, 234, 350, 350, 572, 604, 266, 510, 266, 437, 622, 390, 583, 583, 611, 582, 608, 561, 616, 617, 296, 296, 604, 604, 604, 542, 958, 660, 653, 686, 721, 638, 610, 724, 734, 296, 566, 656, 598, 854, 734, 748, 610, 748, 665, 641, 604, 708, 648, 961, 601, 572, 630, 348, 437, 348, 560, 539, 500, 566, 627, 560, 627, 577, 393, 532, 619, 266, 266, 567, 306, 953, 619, 600, 627, 627, 408, 527, 419, 617, 520, 836, 533, 516, 534, 351, 243, 351, 540];
const BOLD = [306, 291, 431, 670, 634, 908, 638, 244, 376, 376, 582, 604, 281, 521, 281, 456, 636, 416, 591, 589, 633, 582, 613, 591, 623, 617, 300, 300, 604, 604, 604, 583, 941, 671, 672, 683, 719, 633, 612, 723, 739, 310, 599, 679, 601, 890, 739, 741, 646, 741, 680, 644, 635, 710, 670, 984, 640, 626, 633, 375, 456, 375, 593, 539, 500, 574, 627, 564, 627, 579, 407, 549, 619, 282, 282, 602, 319, 945, 619, 599, 627, 627, 422, 531, 430, 618, 546, 876, 569, 546, 523, 395, 292, 395, 576];
const OTHER = 720;

export function textWidth(text: string, sizeMm: number, bold = false): number {
  const table = bold ? BOLD : REGULAR;
  let sum = 0;
  for (const character of text) sum += table[character.codePointAt(0)! - FIRST] ?? OTHER;
  return (sum * sizeMm) / 1000;
}

/** Lines no wider than widthMm; a single word that is wider is broken. At least one line. */
export function wrapText(text: string, widthMm: number, sizeMm: number, bold = false): string[] {
  const lines: string[] = [];
  let line = '';
  for (let word of text.split(/\s+/).filter((w) => w !== '')) {
    const joined = line === '' ? word : `${line} ${word}`;
    if (textWidth(joined, sizeMm, bold) <= widthMm) {
      line = joined;
      continue;
    }
    if (line !== '') lines.push(line);
    while (textWidth(word, sizeMm, bold) > widthMm && word.length > 1) {
      const head = fitting(word, widthMm, sizeMm, bold);
      lines.push(head);
      word = word.slice(head.length);
    }
    line = word;
  }
  return line === '' && lines.length > 0 ? lines : [...lines, line];
}

/** Cut short with an ellipsis where it is wider. */
export function shortened(text: string, widthMm: number, sizeMm: number, bold = false): string {
  if (textWidth(text, sizeMm, bold) <= widthMm) return text;
  return `${fitting(text, widthMm - textWidth('…', sizeMm, bold), sizeMm, bold).trimEnd()}…`;
}

function fitting(text: string, widthMm: number, sizeMm: number, bold: boolean): string {
  let head = '';
  for (const character of text) {
    if (head !== '' && textWidth(head + character, sizeMm, bold) > widthMm) break;
    head += character;
  }
  return head;
}
