/** Facts written into picture files' headers: EXIF orientation and density, JFIF and PNG density. */

/** A little-endian EXIF block with the given entries, as JPEG's APP1 holds it. */
export function exifSegment(facts: { orientation?: number; dpi?: number; exposure?: boolean }): Uint8Array {
  const entries: [tag: number, type: number, value: number][] = [];
  if (facts.orientation !== undefined) entries.push([0x112, 3, facts.orientation]);
  if (facts.dpi !== undefined) entries.push([0x11a, 5, facts.dpi], [0x11b, 5, facts.dpi], [0x128, 3, 2]);
  if (facts.exposure) entries.push([0x829a, 5, 0.01]);
  const directory = 8, tail = directory + 2 + 12 * entries.length + 4, tiff = new DataView(new ArrayBuffer(tail + 8 * entries.length));
  tiff.setUint16(0, 0x4949); tiff.setUint16(2, 42, true); tiff.setUint32(4, directory, true); tiff.setUint16(directory, entries.length, true);
  entries.forEach(([tag, type, value], i) => {
    const at = directory + 2 + 12 * i;
    tiff.setUint16(at, tag, true); tiff.setUint16(at + 2, type, true); tiff.setUint32(at + 4, 1, true);
    if (type === 3) tiff.setUint16(at + 8, value, true);
    else {
      tiff.setUint32(at + 8, tail + 8 * i, true);
      tiff.setUint32(tail + 8 * i, Math.round(value * 1000), true);
      tiff.setUint32(tail + 8 * i + 4, 1000, true);
    }
  });
  const body = new Uint8Array(tiff.buffer), segment = new Uint8Array(10 + body.length);
  segment.set([0xff, 0xe1, (body.length + 8) >> 8, (body.length + 8) & 255, 0x45, 0x78, 0x69, 0x66, 0, 0]);
  segment.set(body, 10);
  return segment;
}

export function jfifSegment(dpi: number): Uint8Array {
  return new Uint8Array([0xff, 0xe0, 0, 16, 0x4a, 0x46, 0x49, 0x46, 0, 1, 1, 1, dpi >> 8, dpi & 255, dpi >> 8, dpi & 255, 0, 0]);
}

/** Puts segments right behind a JPEG's first two bytes, in place of its own JFIF segment. */
export function withSegments(jpeg: Uint8Array, ...segments: Uint8Array[]): Uint8Array {
  const own = jpeg[3] === 0xe0 ? 4 + ((jpeg[4] << 8) | jpeg[5]) : 2;
  return new Uint8Array([0xff, 0xd8, ...segments.flatMap((s) => [...s]), ...jpeg.subarray(own)]);
}

/** A pHYs chunk behind the header of a PNG. */
export function withPhys(png: Uint8Array, dotsPerMetre: number, crc32: (bytes: Uint8Array) => number): Uint8Array {
  const chunk = new DataView(new ArrayBuffer(21));
  chunk.setUint32(0, 9); chunk.setUint32(4, 0x70485973); chunk.setUint32(8, dotsPerMetre); chunk.setUint32(12, dotsPerMetre); chunk.setUint8(16, 1);
  chunk.setUint32(17, crc32(new Uint8Array(chunk.buffer, 4, 13)));
  return new Uint8Array([...png.subarray(0, 33), ...new Uint8Array(chunk.buffer), ...png.subarray(33)]);
}
