/**
 * Geometry of the sign-in picture: a sheet in the platform's corner with six impressions of as many die shapes, each with an even
 * border; one has missed a little and waits for a re-stamp. All in mm of an invented sheet, x right, y down.
 */
export const VIEW = { w: 134, h: 158 };
export const SHEET = { x: 14, y: 14, w: 106, h: 130 };

export interface Impression { x: number; y: number; cut: string; stitch: string; ink: string[]; missed: string | null }

/** Half width and height of a label, its corner radius, and its written lines as letter heights. */
const LABELS: { w: number; h: number; r: number; lines: string[] }[] = [
  { w: 44, h: 30, r: 4, lines: ['tllahlo', 'aalha'] },
  { w: 44, h: 30, r: 15, lines: ['alalho', 'laao'] },
  { w: 44, h: 34, r: 9, lines: ['hlaalo'] },
  { w: 34, h: 34, r: 17, lines: ['laha', 'alo'] },
  { w: 44, h: 22, r: 11, lines: ['haaloal'] },
  { w: 44, h: 30, r: 2, lines: ['laoahl', 'oaalo'] },
];
const MISSED = 4;
const COLUMN = 51, FIRST = { x: SHEET.x + 27.5, y: SHEET.y + 24 };
const ROW_MIDDLES = [0, 41, 82];
const STITCH = 2.2;

export function impressions(): Impression[] {
  return LABELS.map((label, i) => {
    const missedAt = i === MISSED ? 3 : Infinity;
    const written = label.lines.map((letters, row) => writing(letters, (row - (label.lines.length - 1) / 2) * 9 + 3));
    return {
      x: FIRST.x + (i % 2) * COLUMN,
      y: FIRST.y + ROW_MIDDLES[Math.floor(i / 2)],
      cut: roundedBox(label.w, label.h, label.r),
      stitch: roundedBox(label.w - 2 * STITCH, label.h - 2 * STITCH, Math.max(0.5, label.r - STITCH)),
      ink: written.map((loops) => loops.slice(0, missedAt).join('')),
      missed: i === MISSED ? rest(written[0], missedAt) : null,
    };
  });
}

/** What the press left out, as a path of its own that begins where the ink ends. */
function rest(loops: string[], from: number): string {
  const end = loops.slice(0, from).join('').match(/-?[\d.]+ -?[\d.]+(?=\s*$)/);
  return `M${end?.[0] ?? '0 0'}${loops.slice(from).join('')}`;
}

/** Joined loops like a quick hand: `l`, `h`, `t` reach up, `a`, `o` are small. One path part a letter, absolute, so that it can be cut anywhere. */
function writing(letters: string, baseline: number): string[] {
  const step = 4.1;
  let x = (-step * letters.length) / 2;
  return [...letters].map((letter, n) => {
    const tall = 'lht'.includes(letter) ? 7.2 : 3.4;
    const start = n === 0 ? `M${x} ${baseline}` : '';
    const [x1, x2] = [x + step * 1.15, x - step * 0.1];
    const loop = `C${x1} ${baseline - tall * 0.45} ${x1} ${baseline - tall} ${x + step * 0.5} ${baseline - tall}C${x2} ${baseline - tall} ${x + step * 0.25} ${baseline + 0.4} ${x + step} ${baseline}`;
    x += step;
    return start + loop;
  });
}

function roundedBox(w: number, h: number, radius: number): string {
  const r = Math.min(radius, w / 2, h / 2);
  const [x, y] = [w / 2, h / 2];
  return `M${-x + r} ${-y}H${x - r}A${r} ${r} 0 0 1 ${x} ${-y + r}V${y - r}A${r} ${r} 0 0 1 ${x - r} ${y}H${-x + r}A${r} ${r} 0 0 1 ${-x} ${y - r}V${-y + r}A${r} ${r} 0 0 1 ${-x + r} ${-y}Z`;
}

/** Ruler along an edge: a mark every 2 mm, a long one every 10. */
export const RULER = Array.from({ length: 300 }, (_, i) => ({ at: i * 2, length: i % 5 === 0 ? 5 : 2.5 }));
