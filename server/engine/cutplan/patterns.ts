/**
 * The best way to cut one rectangle into parts with straight cuts that each go right across the piece in hand.
 *
 * Input: a piece w × h and part sizes with their worth. Output: a tree of cuts with the most worth, and among those the fewest
 * cuts. Exact for parts without number: only cuts at sums of part sizes need trying, and of those, since what is left and right of a cut may be
 * swapped, only the ones in the first half (J. C. Herz, Recursive computational
 * procedure for two-dimensional stock cutting, IBM J. Res. Dev. 16, 1972; N. Christofides and C. Whitlock, An algorithm for
 * two-dimensional cutting problems, Operations Research 25, 1977). Cost: pieces × cuts, each piece size worked out once.
 */
export interface PatternPart { index: number; widthMm: number; heightMm: number; worth: number }

export type CutTree =
  | { kind: 'part'; index: number }
  | { kind: 'left' }
  | { kind: 'cut'; axis: 'x' | 'y'; atMm: number; first: CutTree; second: CutTree };

interface Found { worth: number; cuts: number; tree: CutTree }

/** Sizes that agree this well are one, mm: rounding of inches. */
const SAME_MM = 1e-4;
/** Sums beyond this many a side are thinned; more part sizes than make so many are rare on a craft table. */
const MOST_SUMS = 160;

export function bestPattern(widthMm: number, heightMm: number, parts: readonly PatternPart[]): { tree: CutTree; worth: number } {
  const xs = sums(parts.map((part) => part.widthMm), widthMm), ys = sums(parts.map((part) => part.heightMm), heightMm);
  const known = new Map<string, Found>();

  function solve(w: number, h: number): Found {
    const key = `${w.toFixed(3)} ${h.toFixed(3)}`;
    const before = known.get(key);
    if (before) return before;
    let best: Found = NOTHING;
    const offer = (found: Found) => {
      if (found.worth > best.worth + 1e-9 || (found.worth > best.worth - 1e-9 && found.cuts < best.cuts)) best = found;
    };
    const fullW = lastUpTo(xs, w), fullH = lastUpTo(ys, h);
    if (fullW < w - SAME_MM || fullH < h - SAME_MM) {
      // What no sum of sizes reaches is cut off first; then halves may be swapped.
      if (fullW > 0 && fullH > 0) best = fullW < w - SAME_MM ? joined('x', fullW, solve(fullW, h), NOTHING) : joined('y', fullH, solve(w, fullH), NOTHING);
      known.set(key, best);
      return best;
    }
    for (const part of parts) if (same(part.widthMm, w) && same(part.heightMm, h)) offer({ worth: part.worth, cuts: 0, tree: { kind: 'part', index: part.index } });
    for (const at of xs) if (at > SAME_MM && at <= w / 2 + SAME_MM) offer(joined('x', at, solve(at, h), solve(w - at, h)));
    for (const at of ys) if (at > SAME_MM && at <= h / 2 + SAME_MM) offer(joined('y', at, solve(w, at), solve(w, h - at)));
    known.set(key, best);
    return best;
  }
  if (parts.length === 0) return { tree: { kind: 'left' }, worth: 0 };
  const { tree, worth } = solve(widthMm, heightMm);
  return { tree, worth };
}

const NOTHING: Found = { worth: 0, cuts: 0, tree: { kind: 'left' } };

/** Largest of the sorted sums that is no more than the length; 0 where none is. */
function lastUpTo(all: readonly number[], length: number): number {
  let last = 0;
  for (const sum of all) if (sum <= length + SAME_MM) last = sum;
  return last;
}

function joined(axis: 'x' | 'y', atMm: number, a: Found, b: Found): Found {
  return { worth: a.worth + b.worth, cuts: a.cuts + b.cuts + 1, tree: { kind: 'cut', axis, atMm, first: a.tree, second: b.tree } };
}

export const same = (a: number, b: number): boolean => Math.abs(a - b) < SAME_MM;

/** Sums of sizes, each as often as fits, up to a length; sorted. */
function sums(sizes: readonly number[], length: number): number[] {
  let all = [0];
  for (const size of new Set(sizes)) {
    if (size > length + SAME_MM) continue;
    for (let i = 0; i < all.length && all.length < MOST_SUMS * 4; i++) {
      const next = all[i] + size;
      if (next <= length + SAME_MM && !all.some((known) => same(known, next))) all.push(next);
    }
  }
  all = all.filter((sum) => sum > 0).sort((a, b) => a - b);
  return all.length > MOST_SUMS ? all.filter((_, i) => i % Math.ceil(all.length / MOST_SUMS) === 0) : all;
}
