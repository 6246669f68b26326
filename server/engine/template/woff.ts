/**
 * A font file of the kind that browsers load (W3C, WOFF File Format 1.0) unpacked to the kind that is embedded in documents (ISO/IEC 14496-22, “sfnt”).
 * The PDF writer reads WOFF too, but inflates it in JavaScript, which takes longer than all else in a small document.
 *
 * Input: the file's bytes, not mutated. Output: header, table directory and tables, each at a multiple of four bytes. Throws on anything else. O(bytes).
 */
import { inflateSync } from 'node:zlib';

const SIGNATURE = 0x774f4646;
const HEADER = 44, ENTRY = 20;
const SFNT_HEADER = 12, SFNT_ENTRY = 16;

export function sfntOf(woff: Buffer): Buffer {
  if (woff.length < HEADER || woff.readUInt32BE(0) !== SIGNATURE) throw new RangeError('Not a WOFF 1.0 font file.');
  const count = woff.readUInt16BE(12);
  const tables = Array.from({ length: count }, (_, i) => {
    const at = HEADER + i * ENTRY;
    const [offset, packed, length] = [4, 8, 12].map((field) => woff.readUInt32BE(at + field));
    const stored = woff.subarray(offset, offset + packed);
    // A table that would not get smaller is stored as it is.
    const data = packed < length ? inflateSync(stored) : stored;
    if (data.length !== length) throw new RangeError(`A table of the font has ${data.length} bytes instead of ${length}.`);
    return { tag: woff.subarray(at, at + 4), checksum: woff.readUInt32BE(at + 16), data };
  });
  const power = 2 ** Math.floor(Math.log2(count));
  const directory = Buffer.alloc(SFNT_HEADER + count * SFNT_ENTRY);
  directory.writeUInt32BE(woff.readUInt32BE(4), 0);
  [count, power * SFNT_ENTRY, Math.log2(power), (count - power) * SFNT_ENTRY].forEach((value, i) => directory.writeUInt16BE(value, 4 + 2 * i));
  let offset = directory.length;
  const parts: Buffer[] = [directory];
  tables.forEach(({ tag, checksum, data }, i) => {
    const at = SFNT_HEADER + i * SFNT_ENTRY;
    tag.copy(directory, at);
    [checksum, offset, data.length].forEach((value, k) => directory.writeUInt32BE(value, at + 4 * (k + 1)));
    const padded = Buffer.alloc(Math.ceil(data.length / 4) * 4);
    padded.set(data);
    parts.push(padded);
    offset += padded.length;
  });
  return Buffer.concat(parts);
}
