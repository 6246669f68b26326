/**
 * Picture file → pixels. JPEG and WebP by the codecs of the jSquash packages (WebAssembly, taken from disk), about five times as fast as
 * decoders written in JavaScript; the usual PNGs by decode-png.ts; all others, and JPEGs in inks (CMYK), by Jimp.
 *
 * Input: the file and its header as `probePicture` told it, so that sizes are known to be bearable. Output: RGBA as stored, not yet turned
 * upright, transparent pixels laid on white paper unless told otherwise. Throws ReadingError `damaged` where the file cannot be decoded or breaks off.
 * Memory: 4 bytes a pixel, and for JPEG and WebP up to twice as much again in the codec's heap, which never shrinks: whoever read a very large
 * picture in a thread does well to end that thread.
 */
import { readFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { decodePng } from './decode-png.ts';
import type { PictureHeader } from './probe.ts';
import { damaged } from './reading-error.ts';

export interface Pixels {
  width: number;
  height: number;
  /** 4 bytes a pixel: red, green, blue, and 255. */
  rgba: Uint8Array;
  /** Something of what lies behind shows through. */
  transparent?: boolean;
}

type Codec = (bytes: ArrayBuffer) => Promise<{ data: Uint8ClampedArray; width: number; height: number }>;
type CodecModule = { default: Codec; init: (wasm: WebAssembly.Module) => Promise<void> };

const codecs = {
  jpeg: { wasm: '@jsquash/jpeg/codec/dec/mozjpeg_dec.wasm', load: () => import('@jsquash/jpeg/decode.js') },
  webp: { wasm: '@jsquash/webp/codec/dec/webp_dec.wasm', load: () => import('@jsquash/webp/decode.js') },
};
/** Compiled once for a thread; the instances with their heaps live in the packages' modules. */
const compiled = new Map<string, Promise<WebAssembly.Module>>();
const ready = new Set<string>();

/** `ground` is the brightness of what transparent pixels are laid on. */
export async function decodePicture(file: Uint8Array, header: PictureHeader, ground = 255): Promise<Pixels> {
  let pixels: Pixels;
  try {
    if (header.type === 'jpeg') pixels = await decodeJpeg(file);
    else if (header.type === 'webp') pixels = await decodeByCodec('webp', file);
    else pixels = (header.type === 'png' && decodePng(file)) || (await decodeByJimp(file));
  } catch (error) {
    // Decoders throw errors of all kinds, and WebAssembly ones even numbers.
    throw damaged(error);
  }
  const { width, height, rgba } = pixels;
  if (width !== header.storedWidthPx || height !== header.storedHeightPx || rgba.length < 4 * width * height) throw damaged();
  return { ...pixels, transparent: layOn(rgba, ground) };
}

async function decodeJpeg(file: Uint8Array): Promise<Pixels> {
  // The codec fills what is missing of a broken-off file with grey, which would look like ink.
  if (!hasEndOfImage(file)) throw damaged();
  try {
    return await decodeByCodec('jpeg', file);
  } catch {
    return decodeByJimp(file);
  }
}

/** Looked for behind the first scan's header only: previews in a camera's notes have ends of their own. */
function hasEndOfImage(file: Uint8Array): boolean {
  let at = 2;
  while (at + 4 < file.length && !(file[at] === 0xff && file[at + 1] === 0xda)) {
    at += file[at] !== 0xff || file[at + 1] === 0xff ? 1 : 2 + ((file[at + 2] << 8) | file[at + 3]);
  }
  // Inside compressed data 0xff is followed by 0 or a restart marker.
  for (let i = file.length - 2; i > at; i--) if (file[i] === 0xff && file[i + 1] === 0xd9) return true;
  return false;
}

async function decodeByCodec(kind: keyof typeof codecs, file: Uint8Array): Promise<Pixels> {
  const codec = (await codecs[kind].load()) as unknown as CodecModule;
  if (!ready.has(kind)) {
    let wasm = compiled.get(kind);
    if (!wasm) {
      wasm = readFile(createRequire(import.meta.url).resolve(codecs[kind].wasm)).then((bytes) => WebAssembly.compile(bytes));
      compiled.set(kind, wasm);
    }
    await codec.init(await wasm);
    ready.add(kind);
  }
  try {
    // A copy with a buffer of its own: a Buffer's may be a pool, of which the codec would take all.
    const { data, width, height } = await codec.default(new Uint8Array(file).buffer);
    return { width, height, rgba: new Uint8Array(data.buffer, data.byteOffset, data.byteLength) };
  } catch (error) {
    ready.delete(kind);
    throw error;
  }
}

async function decodeByJimp(file: Uint8Array): Promise<Pixels> {
  const { Jimp } = await import('jimp');
  const { bitmap } = await Jimp.fromBuffer(Buffer.from(file.buffer, file.byteOffset, file.byteLength));
  return { width: bitmap.width, height: bitmap.height, rgba: new Uint8Array(bitmap.data.buffer, bitmap.data.byteOffset, bitmap.data.byteLength) };
}

/** Changes the pixels in place: each becomes what is seen with plain paper behind it. True where any was not opaque. */
function layOn(rgba: Uint8Array, ground: number): boolean {
  let transparent = false;
  for (let i = 3; i < rgba.length; i += 4) {
    const alpha = rgba[i];
    if (alpha === 255) continue;
    for (let c = i - 3; c < i; c++) rgba[c] = ground + Math.round(((rgba[c] - ground) * alpha) / 255);
    rgba[i] = 255;
    transparent = true;
  }
  return transparent;
}
