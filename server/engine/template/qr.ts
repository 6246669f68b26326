// A declaration file that no module imports must be named where it is needed, or the kernels alone would not see it.
// eslint-disable-next-line @typescript-eslint/triple-slash-reference -- an ambient module cannot be imported by path
/// <reference path="./qrcode-core.d.ts" />
/**
 * A QR code (ISO/IEC 18004) as squares: the dark modules of each row side by side are one ring. The encoding is the package qrcode's; only its core
 * is used, which needs neither Node nor a canvas. Error correction M: a smudge of 15 % is read.
 */
import QrCode from 'qrcode/lib/core/qrcode.js';
import type { Point, Ring } from '../geometry/types.ts';

/** Light modules that the standard asks for on all sides. */
export const QUIET_MODULES = 4;

/** sizeMm: of the code without its quiet zone, which the caller leaves free. */
export function qrRings(text: string, at: Point, sizeMm: number): Ring[] {
  const { modules } = QrCode.create(text, { errorCorrectionLevel: 'M' });
  const cell = sizeMm / modules.size;
  const rings: Ring[] = [];
  for (let row = 0; row < modules.size; row++) {
    for (let column = 0; column < modules.size; column++) {
      if (!modules.get(row, column)) continue;
      const from = column;
      while (column + 1 < modules.size && modules.get(row, column + 1)) column++;
      const x0 = at.x + from * cell, x1 = at.x + (column + 1) * cell, y0 = at.y + row * cell, y1 = y0 + cell;
      rings.push([{ x: x0, y: y0 }, { x: x1, y: y0 }, { x: x1, y: y1 }, { x: x0, y: y1 }]);
    }
  }
  return rings;
}

/** An address that only the machine itself can open: a phone cannot. */
export function isLoopback(url: string): boolean {
  const host = /^https?:\/\/(?:[^/@]*@)?(\[[^\]]*\]|[^/:?#]*)/i.exec(url)?.[1].toLowerCase() ?? '';
  return host === 'localhost' || host.endsWith('.localhost') || /^127(\.\d{1,3}){0,3}$/.test(host) || host === '0.0.0.0' || host === '[::1]' || host === '[::]';
}

export function benchAddress(url: string, setupNumber: number): string {
  if (url.includes('{setup}')) return url.replaceAll('{setup}', `${setupNumber}`);
  const [base, fragment] = url.split('#', 2);
  return `${base}${base.includes('?') ? '&' : '?'}setup=${setupNumber}${fragment === undefined ? '' : `#${fragment}`}`;
}
