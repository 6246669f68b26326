/**
 * How wide words are in Work Sans, to break lines and to keep words inside their columns where no font is at hand.
 *
 * Advance widths in thousandths of the size, as the font's own hmtx table has them (Work Sans 400 and 600; Basic Latin, Latin-1 and the usual dashes and quotes). Other
 * characters count as a wide letter, so that a line is rather broken early. No kerning: it only makes text narrower.
 */
/** Basic Latin from 32 to 126, Latin-1 from 160 to 255. */
const FIRST = 32, LATIN_1 = 160;
const REGULAR = [341, 272, 403, 639, 622, 856, 623, 234, 350, 350, 572, 604, 266, 510, 266, 437, 622, 390, 583, 583, 611, 582, 608, 561, 616, 617, 296, 296, 604, 604, 604, 542, 958, 660, 653, 686, 721, 638, 610, 724, 734, 296, 566, 656, 598, 854, 734, 748, 610, 748, 665, 641, 604, 708, 648, 961, 601, 572, 630, 348, 437, 348, 560, 539, 500, 566, 627, 560, 627, 577, 393, 532, 619, 266, 266, 567, 306, 953, 619, 600, 627, 627, 408, 527, 419, 617, 520, 836, 533, 516, 534, 351, 243, 351, 540];
const REGULAR_1 = [341, 264, 567, 620, 665, 620, 243, 598, 500, 820, 382, 493, 604, 510, 820, 500, 460, 604, 365, 362, 600, 622, 657, 226, 500, 242, 360, 493, 788, 855, 908, 537, 660, 660, 660, 660, 660, 660, 954, 686, 638, 638, 638, 638, 296, 296, 296, 296, 737, 734, 748, 748, 748, 748, 748, 604, 748, 708, 708, 708, 708, 572, 627, 617, 566, 566, 566, 566, 566, 566, 895, 560, 577, 577, 577, 577, 266, 266, 266, 266, 620, 619, 600, 600, 600, 600, 600, 604, 600, 617, 617, 617, 617, 516, 627, 516];
const BOLD = [306, 291, 431, 670, 634, 908, 638, 244, 376, 376, 582, 604, 281, 521, 281, 456, 636, 416, 591, 589, 633, 582, 613, 591, 623, 617, 300, 300, 604, 604, 604, 583, 941, 671, 672, 683, 719, 633, 612, 723, 739, 310, 599, 679, 601, 890, 739, 741, 646, 741, 680, 644, 635, 710, 670, 984, 640, 626, 633, 375, 456, 375, 593, 539, 500, 574, 627, 564, 627, 579, 407, 549, 619, 282, 282, 602, 319, 945, 619, 599, 627, 627, 422, 531, 430, 618, 546, 876, 569, 546, 523, 395, 292, 395, 576];
const BOLD_1 = [306, 286, 572, 621, 653, 649, 292, 614, 500, 790, 418, 552, 604, 521, 790, 500, 482, 604, 382, 373, 562, 622, 715, 256, 500, 277, 400, 552, 841, 909, 937, 580, 671, 671, 671, 671, 671, 671, 935, 683, 633, 633, 633, 633, 310, 310, 310, 310, 740, 739, 741, 741, 741, 741, 741, 604, 741, 710, 710, 710, 710, 626, 657, 636, 574, 574, 574, 574, 574, 574, 887, 564, 578, 578, 578, 578, 282, 282, 282, 282, 610, 619, 599, 599, 599, 599, 599, 616, 599, 618, 618, 618, 618, 546, 627, 546];
const MARKS = '–—‘’“”•…';
const REGULAR_MARKS = [664, 1014, 255, 255, 443, 443, 430, 870];
const BOLD_MARKS = [681, 1009, 280, 280, 504, 504, 430, 906];
const OTHER = 720;

/** Whether the main font file has it and its width is known. */
export function isCommon(character: string): boolean {
  return advance(character, false) !== undefined;
}

function advance(character: string, bold: boolean): number | undefined {
  const code = character.codePointAt(0)!;
  return code < LATIN_1 ? (bold ? BOLD : REGULAR)[code - FIRST] : code < 256 ? (bold ? BOLD_1 : REGULAR_1)[code - LATIN_1] : (bold ? BOLD_MARKS : REGULAR_MARKS)[MARKS.indexOf(character)];
}

export function textWidth(text: string, sizeMm: number, bold = false): number {
  let sum = 0;
  for (const character of text) sum += advance(character, bold) ?? OTHER;
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
