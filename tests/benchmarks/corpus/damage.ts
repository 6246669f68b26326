/** Files damaged in the ways that files are: bits flipped, broken off, cut out, lengths in headers that lie. From a seed. */
import type { Random } from './random.ts';

export function damageFile(random: Random, file: Uint8Array): Uint8Array {
  const copy = file.slice();
  switch (random.whole(0, 5)) {
    case 0: {
      for (let n = random.whole(1, 40); n > 0; n--) copy[random.whole(0, copy.length - 1)] ^= 1 << random.whole(0, 7);
      return copy;
    }
    case 1: return copy.subarray(0, random.whole(0, copy.length - 1));
    case 2: {
      // A lie in the header: any four bytes of its first hundred become a large or small number.
      const at = random.whole(2, Math.min(100, copy.length - 5)), lie = random.pick([0, 1, 0x7fffffff, 0xffffffff, 0x10000, 40_000]);
      new DataView(copy.buffer).setUint32(at, lie, random.next() < 0.5);
      return copy;
    }
    case 3: {
      const from = random.whole(0, copy.length - 2), to = random.whole(from + 1, copy.length - 1);
      return new Uint8Array([...copy.subarray(0, from), ...copy.subarray(to)]);
    }
    case 4: {
      const from = random.whole(10, copy.length - 10);
      copy.fill(random.whole(0, 255), from, Math.min(copy.length, from + random.whole(1, 2000)));
      return copy;
    }
    default: {
      for (let i = random.whole(0, 60); i < copy.length; i += random.whole(200, 4000)) copy[i] = random.whole(0, 255);
      return copy;
    }
  }
}
