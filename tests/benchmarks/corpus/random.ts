/** A small seeded generator (mulberry32, public domain, T. Ettinger): the same corpus on every machine. */
export interface Random {
  /** 0 ≤ value < 1. */
  next(): number;
  between(from: number, to: number): number;
  whole(from: number, to: number): number;
  pick<T>(items: readonly T[]): T;
  /** Mean 0, variance 1. */
  normal(): number;
}

export function seeded(seed: number): Random {
  let state = seed >>> 0;
  const next = () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
  return {
    next,
    between: (from, to) => from + (to - from) * next(),
    whole: (from, to) => Math.floor(from + (to + 1 - from) * next()),
    pick: (items) => items[Math.floor(next() * items.length)],
    normal: () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next()),
  };
}
