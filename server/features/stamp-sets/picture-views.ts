/**
 * A picture as browsers show it: turned upright, not larger than a page needs, as JPEG; and a small one for cards. Runs in a
 * worker thread.
 *
 * Input: the file as sent. Output: two JPEG files. Pixels are averaged over the area that each new one covers, so hairlines
 * grow pale instead of vanishing. Memory: 4 bytes a pixel of the file; the rest is small.
 */
import { readFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { decodePicture } from '../../engine/reading/decode.ts';
import type { Pixels } from '../../engine/reading/decode.ts';
import { uprightPlace, uprightSize } from '../../engine/reading/orientation.ts';
import { probePicture } from '../../engine/reading/probe.ts';

/** Enough to see where a letter ends when zoomed in; a third of a megabyte or so. */
const VIEW = { sidePx: 3000, quality: 82 };
const SMALL = { sidePx: 480, quality: 80 };

export async function pictureViews(input: { file: Uint8Array }): Promise<{ view: Uint8Array; small: Uint8Array }> {
  const header = probePicture(input.file);
  const view = turnUpright(shrink(await decodePicture(input.file, header), VIEW.sidePx), header.orientation);
  return { view: await encode(view, VIEW.quality), small: await encode(shrink(view, SMALL.sidePx), SMALL.quality) };
}

/** Area average down to the given longer side; the picture itself where it is no larger. */
function shrink(picture: Pixels, sidePx: number): Pixels {
  const factor = Math.max(picture.width, picture.height) / sidePx;
  if (factor <= 1) return picture;
  const width = Math.max(1, Math.round(picture.width / factor)), height = Math.max(1, Math.round(picture.height / factor));
  const rgba = new Uint8Array(4 * width * height);
  const columns = Array.from({ length: width + 1 }, (_, x) => Math.floor((x * picture.width) / width));
  const sums = new Float64Array(3 * width);
  for (let y = 0; y < height; y++) {
    const top = Math.floor((y * picture.height) / height), bottom = Math.max(top + 1, Math.floor(((y + 1) * picture.height) / height));
    sums.fill(0);
    for (let row = top; row < bottom; row++) {
      for (let x = 0; x < width; x++) {
        for (let at = 4 * (row * picture.width + columns[x]), end = 4 * (row * picture.width + Math.max(columns[x] + 1, columns[x + 1])); at < end; at += 4) {
          sums[3 * x] += picture.rgba[at];
          sums[3 * x + 1] += picture.rgba[at + 1];
          sums[3 * x + 2] += picture.rgba[at + 2];
        }
      }
    }
    for (let x = 0; x < width; x++) {
      const count = (bottom - top) * Math.max(1, columns[x + 1] - columns[x]), at = 4 * (y * width + x);
      for (let c = 0; c < 3; c++) rgba[at + c] = Math.round(sums[3 * x + c] / count);
      rgba[at + 3] = 255;
    }
  }
  return { width, height, rgba };
}

/** As the reading turns it, so that what is drawn over the picture lies where it was read. */
function turnUpright(stored: Pixels, orientation: number): Pixels {
  if (orientation === 1) return stored;
  const turning = { width: stored.width, height: stored.height, orientation, mirrored: false };
  const { width, height } = uprightSize(turning);
  const from = new Uint32Array(stored.rgba.buffer, stored.rgba.byteOffset, width * height), to = new Uint32Array(width * height);
  for (let y = 0, i = 0; y < stored.height; y++) {
    for (let x = 0; x < stored.width; x++) {
      const at = uprightPlace(turning, { x: x + 0.5, y: y + 0.5 });
      to[Math.floor(at.y) * width + Math.floor(at.x)] = from[i++];
    }
  }
  return { width, height, rgba: new Uint8Array(to.buffer) };
}

/** The codec is taken from disk and compiled once a thread. */
let codec: Promise<(data: Pixels, quality: number) => Promise<Uint8Array>> | undefined;

async function encode(picture: Pixels, quality: number): Promise<Uint8Array> {
  codec ??= loadCodec();
  return (await codec)(picture, quality);
}

async function loadCodec() {
  const { default: encodeJpeg, init } = await import('@jsquash/jpeg/encode.js');
  const wasm = await WebAssembly.compile(await readFile(createRequire(import.meta.url).resolve('@jsquash/jpeg/codec/enc/mozjpeg_enc.wasm')));
  await (init as unknown as (module: WebAssembly.Module) => Promise<void>)(wasm);
  return async ({ width, height, rgba }: Pixels, quality: number) => {
    const data = { width, height, data: new Uint8ClampedArray(rgba.buffer, rgba.byteOffset, 4 * width * height) };
    // Progressive and optimised coding cost seconds on a large picture and save little.
    return new Uint8Array(await encodeJpeg(data as unknown as Parameters<typeof encodeJpeg>[0], { quality, progressive: false, optimize_coding: false }));
  };
}
