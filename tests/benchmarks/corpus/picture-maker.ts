/**
 * Pictures of made sheets as people have them: clean art, flatbed scans, photographs. Every picture comes with the truth about it.
 *
 * Scans and photographs are drawn from outlines that were turned or put into perspective first, so that no pixel is resampled; blur,
 * light, grain and dust come after, then the codec. All from the seed.
 */
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { Jimp } from 'jimp';
import { applyHomography, homographyFrom, scaling, type Homography } from '../../../server/engine/reading/homography.ts';
import { markerRings, PHOTO_PAGE_MARKERS } from '../../../server/engine/reading/photo-page-layout.ts';
import type { Point, Ring } from '../../../server/engine/geometry/types.ts';
import type { ReadOptions } from '../../../server/engine/reading/types.ts';
import type { Random } from './random.ts';
import { renderSheet, type Painted, type Raster } from './render.ts';
import type { MadeSheet } from './sheet-maker.ts';

export type PictureKind = 'clean' | 'scan' | 'photo' | 'photo page' | 'mirrored';
export interface MadePicture {
  kind: PictureKind;
  file: Uint8Array;
  options: ReadOptions;
  /** From the picture as read (upright, flipped) to the sheet's mm. */
  toSheet: Homography;
  sheet: MadeSheet;
}

export type Light = (x: number, y: number) => number;

export async function makePicture(random: Random, kind: PictureKind, sheet: MadeSheet): Promise<MadePicture> {
  if (kind === 'clean') return cleanArt(random, sheet);
  if (kind === 'scan' || kind === 'mirrored') return scan(random, kind, sheet);
  return photograph(random, kind, sheet);
}

const INKS = [['#111111', '#ffffff'], ['#1d1b1a', null], ['#2b4a8b', '#ffffff'], ['#b3202a', '#c9a878'], ['#f4f1ea', '#2e3338'], ['#7a7a7a', '#ffffff'], ['#2f7d4f', '#fdf6e3']] as const;

async function cleanArt(random: Random, sheet: MadeSheet): Promise<MadePicture> {
  const [ink, paper] = random.pick(INKS);
  const dpi = random.pick([300, 300, 600, 200]);
  const pxPerMm = dpi / 25.4;
  const raster = renderSheet(sheet.widthMm, sheet.heightMm, pxPerMm, paint(sheet, (p) => p, ink), paper);
  return { kind: 'clean', file: await toPng(raster), options: { dpi }, toSheet: scaling(1 / pxPerMm, 1 / pxPerMm), sheet };
}

async function scan(random: Random, kind: 'scan' | 'mirrored', sheet: MadeSheet): Promise<MadePicture> {
  const dpi = random.pick([300, 300, 400]), pxPerMm = dpi / 25.4, margin = 6;
  const lean = (random.between(-3, 3) * Math.PI) / 180, mirror = kind === 'mirrored' ? -1 : 1;
  const w = sheet.widthMm + 2 * margin, h = sheet.heightMm + 2 * margin;
  const place = (p: Point): Point => {
    const x = mirror * (p.x - sheet.widthMm / 2), y = p.y - sheet.heightMm / 2;
    return { x: w / 2 + Math.cos(lean) * x - Math.sin(lean) * y, y: h / 2 + Math.sin(lean) * x + Math.cos(lean) * y };
  };
  const ink = random.pick(['#26221f', '#26221f', '#27406f', '#7d1f2b', '#575757']);
  const raster = renderSheet(w, h, pxPerMm, [...paint(sheet, place, ink), ...dust(random, w, h)], random.pick(['#f3f0e8', '#fafafa', '#e9e4d8']));
  blur(raster, random.between(0.4, 0.9));
  const slope = { x: random.between(-0.1, 0.1), y: random.between(-0.1, 0.1) };
  shade(raster, (x, y) => 1 + slope.x * (x - 0.5) + slope.y * (y - 0.5) - 0.06 * (x - 0.5) ** 2);
  grain(random, raster, random.between(2, 5));
  // The reading turns by its own reckoning; truth is told in the picture as read, which for faces is flipped.
  const flip = (q: Point) => (kind === 'mirrored' ? { x: raster.width - q.x, y: q.y } : q);
  const corners = [{ x: 0, y: 0 }, { x: sheet.widthMm, y: 0 }, { x: sheet.widthMm, y: sheet.heightMm }, { x: 0, y: sheet.heightMm }];
  const seen = corners.map((c) => { const q = place(c); return flip({ x: q.x * pxPerMm, y: q.y * pxPerMm }); });
  return { kind, file: await toJpeg(raster, 88), options: { dpi, ...(kind === 'mirrored' ? { mirrored: true } : {}) }, toSheet: homographyFrom(seen, corners)!, sheet };
}

async function photograph(random: Random, kind: 'photo' | 'photo page', sheet: MadeSheet): Promise<MadePicture> {
  const width = 3000, height = 2250;
  // The photo page is a letter sheet with the stamped sheet somewhere in its room, a little turned.
  const page = kind === 'photo page' ? { w: 215.9, h: 279.4 } : { w: sheet.widthMm, h: sheet.heightMm };
  const shot = perspective(random, page, width, height);
  const turn = kind === 'photo page' ? (random.between(-4, 4) * Math.PI) / 180 : 0;
  const onPage = (p: Point): Point => {
    if (kind === 'photo') return p;
    const x = p.x - sheet.widthMm / 2, y = p.y - sheet.heightMm / 2;
    return { x: page.w / 2 + Math.cos(turn) * x - Math.sin(turn) * y, y: page.h / 2 + Math.sin(turn) * x + Math.cos(turn) * y };
  };
  const place = (p: Point) => applyHomography(shot, onPage(p));
  const painted: Painted[] = [{ rings: [corners(page).map((p) => applyHomography(shot, p))], fill: '#f6f4ef' }];
  if (kind === 'photo page') {
    for (const marker of PHOTO_PAGE_MARKERS) {
      painted.push({ rings: markerRings(marker).map((ring) => ring.map((p) => applyHomography(shot, { x: p.x + page.w / 2, y: p.y + page.h / 2 }))), fill: '#15130f', evenOdd: true });
    }
    painted.push({ rings: [corners({ w: sheet.widthMm, h: sheet.heightMm }).map(place)], fill: random.pick(['#efeae0', '#fbfaf7', '#d9c3a0']) });
  }
  painted.push(...paint(sheet, place, random.pick(['#2a2623', '#2a2623', '#31406b', '#7c2330'])));
  const raster = renderSheet(width, height, 1, painted, random.pick(['#6b5644', '#454a50', '#7b7f78']));
  blur(raster, random.between(0.6, 1.3));
  shade(raster, shadow(random));
  grain(random, raster, random.between(2, 5));
  const seen = corners({ w: sheet.widthMm, h: sheet.heightMm }).map(place) as [Point, Point, Point, Point];
  const options: ReadOptions = kind === 'photo' ? { sheet: { cornersPx: seen, widthMm: sheet.widthMm, heightMm: sheet.heightMm } } : {};
  return { kind, file: await toJpeg(raster, 90), options, toSheet: homographyFrom(seen, corners({ w: sheet.widthMm, h: sheet.heightMm }))!, sheet };
}

const corners = ({ w, h }: { w: number; h: number }): Point[] => [{ x: 0, y: 0 }, { x: w, y: 0 }, { x: w, y: h }, { x: 0, y: h }];

/** Each corner of the page lands up to 6 % of the picture from where a straight view would put it. */
function perspective(random: Random, page: { w: number; h: number }, width: number, height: number): Homography {
  const upright = page.h > page.w ? { w: (height * 0.88 * page.w) / page.h, h: height * 0.88 } : { w: Math.min(width * 0.88, (height * 0.88 * page.w) / page.h), h: Math.min(height * 0.88, (width * 0.88 * page.h) / page.w) };
  const jitter = () => random.between(-0.03, 0.03) * height;
  const seen = corners(upright).map((p) => ({ x: p.x + (width - upright.w) / 2 + jitter(), y: p.y + (height - upright.h) / 2 + jitter() }));
  return homographyFrom(corners(page), seen)!;
}

function shadow(random: Random): Light {
  const angle = random.between(0, 2 * Math.PI), edge = random.between(-0.2, 0.3), depth = random.between(0.1, 0.35), soft = random.between(0.1, 0.3);
  const vignette = random.between(0.2, 0.6);
  return (x, y) => {
    const along = (x - 0.5) * Math.cos(angle) + (y - 0.5) * Math.sin(angle) - edge;
    return (1 - depth / (1 + Math.exp(-along / (soft / 4)))) * (1 - vignette * ((x - 0.5) ** 2 + (y - 0.5) ** 2));
  };
}

function paint(sheet: MadeSheet, place: (p: Point) => Point, ink: string): Painted[] {
  return sheet.sentiments.map((s) => ({ rings: s.rings.map((ring) => ring.map(place)), fill: ink, evenOdd: true }));
}

/** Specks and a few fibres, all well under a quarter of a millimetre across. */
function dust(random: Random, w: number, h: number): Painted[] {
  return Array.from({ length: random.whole(5, 25) }, () => {
    const x = random.between(1, w - 1), y = random.between(1, h - 1), r = random.between(0.03, 0.1);
    const ring: Ring = Array.from({ length: 8 }, (_, i) => ({ x: x + r * random.between(0.6, 1) * Math.cos((i * Math.PI) / 4), y: y + r * random.between(0.6, 1) * Math.sin((i * Math.PI) / 4) }));
    return { rings: [ring], fill: '#555' };
  });
}

/** Gaussian, separable, in place. */
export function blur(raster: Raster, sigma: number): void {
  const reach = Math.ceil(3 * sigma), kernel = Array.from({ length: 2 * reach + 1 }, (_, i) => Math.exp(-((i - reach) ** 2) / (2 * sigma * sigma)));
  const total = kernel.reduce((a, b) => a + b, 0);
  pass(raster, kernel.map((k) => k / total), reach, true);
  pass(raster, kernel.map((k) => k / total), reach, false);
}

function pass(raster: Raster, kernel: number[], reach: number, across: boolean): void {
  const { width, height, rgba } = raster;
  const length = across ? width : height, lines = across ? height : width, step = across ? 4 : 4 * width, lineStep = across ? 4 * width : 4;
  const line = new Float32Array(length + 2 * reach);
  for (let l = 0; l < lines; l++) {
    for (let c = 0; c < 3; c++) {
      const start = l * lineStep + c;
      for (let i = -reach; i < length + reach; i++) line[i + reach] = rgba[start + step * Math.min(length - 1, Math.max(0, i))];
      for (let i = 0; i < length; i++) {
        let sum = 0;
        for (let k = 0; k < kernel.length; k++) sum += kernel[k] * line[i + k];
        rgba[start + step * i] = sum + 0.5;
      }
    }
  }
}

/** Light over the picture; x and y from 0 to 1. */
export function shade(raster: Raster, light: Light): void {
  for (let y = 0, i = 0; y < raster.height; y++) {
    for (let x = 0; x < raster.width; x++, i += 4) {
      const l = light(x / raster.width, y / raster.height);
      for (let c = 0; c < 3; c++) raster.rgba[i + c] = Math.min(255, raster.rgba[i + c] * l);
    }
  }
}

/** Noise of the sensor and, coarser, of the paper. */
export function grain(random: Random, raster: Raster, sigma: number): void {
  const { width, height, rgba } = raster;
  const table = Float32Array.from({ length: 4096 }, () => sigma * random.normal());
  const coarse = new Float32Array((Math.ceil(width / 3) + 1) * (Math.ceil(height / 3) + 1)).map(() => 0.6 * sigma * random.normal());
  const stride = Math.ceil(width / 3) + 1;
  let state = random.whole(1, 2 ** 30);
  for (let y = 0, i = 0; y < height; y++) {
    for (let x = 0; x < width; x++, i += 4) {
      const paper = coarse[((y / 3) | 0) * stride + ((x / 3) | 0)];
      for (let c = 0; c < 3; c++) {
        state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
        rgba[i + c] = Math.min(255, Math.max(0, rgba[i + c] + paper + table[state >>> 20]));
      }
    }
  }
}

export async function toPng(raster: Raster): Promise<Uint8Array> {
  return new Jimp({ width: raster.width, height: raster.height, data: Buffer.from(raster.rgba) }).getBuffer('image/png', { deflateLevel: 1 });
}

type Encode = (data: { data: Uint8ClampedArray; width: number; height: number }, options: { quality: number }) => Promise<ArrayBuffer>;
const encoders = new Map<string, Promise<Encode>>();
const codecs = {
  jpeg: { load: () => import('@jsquash/jpeg/encode.js'), wasm: '@jsquash/jpeg/codec/enc/mozjpeg_enc.wasm' },
  webp: { load: () => import('@jsquash/webp/encode.js'), wasm: '@jsquash/webp/codec/enc/webp_enc_simd.wasm' },
};

async function encodeBy(kind: keyof typeof codecs, raster: Raster, quality: number): Promise<Uint8Array> {
  let encoder = encoders.get(kind);
  if (!encoder) {
    encoders.set(kind, (encoder = (async () => {
      const codec = await codecs[kind].load();
      const bytes = readFileSync(createRequire(import.meta.url).resolve(codecs[kind].wasm));
      await codec.init((await WebAssembly.compile(bytes)) as never);
      return codec.default as never;
    })()));
  }
  const { rgba, width, height } = raster;
  return new Uint8Array(await (await encoder)({ data: new Uint8ClampedArray(rgba.buffer, rgba.byteOffset, rgba.byteLength), width, height }, { quality }));
}

export function toJpeg(raster: Raster, quality: number): Promise<Uint8Array> {
  return encodeBy('jpeg', raster, quality);
}

export function toWebp(raster: Raster, quality: number): Promise<Uint8Array> {
  return encodeBy('webp', raster, quality);
}
