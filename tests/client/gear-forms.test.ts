import { describe, expect, it } from 'vitest';
import { cardstockForm } from '../../src/components/gear/cardstock-form.ts';
import { drawCardstock } from '../../src/components/gear/cardstock-drawing.ts';
import { CARD, largest, scaleTo, SHEET } from '../../src/components/gear/drawing-scale.ts';
import { inkForm } from '../../src/components/gear/ink-form.ts';
import { drawPlatform, usualOpenSides } from '../../src/components/gear/platform-drawing.ts';
import { platformForm } from '../../src/components/gear/platform-form.ts';
import { drawPrinter } from '../../src/components/gear/printer-drawing.ts';
import { correction, printerForm, TEST_CROSS_MM } from '../../src/components/gear/printer-form.ts';
import { TEST_CROSS_MM as DRAWN_CROSS_MM } from '../../server/engine/template/own-pages.ts';
import { formatLength, formatSize } from '../../server/engine/geometry/units.ts';

const row = { id: '0193a000-0000-7000-8000-000000000001', version: 3, createdAt: '', updatedAt: '', deletedAt: null };
const PLATFORM = { ...row, name: 'Bed', note: 'n', widthMm: 160, heightMm: 170, corner: 'top-right', hinge: 'left', openSides: ['bottom'], lid: { x: 4, y: 4, w: 150, h: 160 }, keepOuts: [{ x: 0, y: 0, w: 12, h: 8 }] } as const;
const PRINTER = { ...row, name: 'P', note: '', paper: { widthMm: 215.9, heightMm: 279.4 }, unprintable: { left: 4, right: 4, top: 4, bottom: 13 }, scale: { x: 0.997, y: 1.0005 }, shift: { x: -0.4, y: 0.8 } };
const CARDSTOCK = { ...row, name: 'C', note: '', widthMm: 148, heightMm: 210, colour: '#FFFFFF', onHand: 5, grain: 'along-width', weightGsm: 300 } as const;
const INK = { ...row, name: 'I', note: '', kind: 'dye', colour: '#22304A', dryingMinutes: 2.5, clearMm: 20 } as const;
const length = { show: (mm: number) => formatLength(mm, 'mm'), showSize: (w: number, h: number) => formatSize(w, h, 'mm') };

describe.each([['platform', platformForm, PLATFORM], ['printer', printerForm, PRINTER], ['cardstock', cardstockForm, CARDSTOCK], ['ink', inkForm, INK]] as const)('the form of a %s', (_kind, form, item) => {
  const { fromItem, toBody, words, check, blank } = form as { fromItem(i: unknown): never; toBody(v: never): object; words(v: never, l: typeof length): [string, string][]; check(v: never): Record<string, string>; blank(u: 'mm' | 'in'): never };

  it('sends back exactly what is stored while nothing is typed', () => {
    const { id: _id, version: _v, createdAt: _c, updatedAt: _u, deletedAt: _d, ...fields } = item;
    expect(toBody(fromItem(item))).toEqual(fields);
    expect(check(fromItem(item))).toEqual({});
  });

  it('asks a new one for a name before anything is sent', () => {
    expect(check(blank('mm')).name).toBe('Give it a name.');
  });

  it('words every field once, so that two versions can be laid side by side', () => {
    const labels = words(fromItem(item), length).map(([label]) => label);
    expect(new Set(labels).size).toBe(labels.length);
    expect(labels).toContain('Name');
  });
});

describe('a platform\'s form', () => {
  it('tells a keep-out or lid that reaches past the bed, by its own field', () => {
    const values = platformForm.fromItem({ ...PLATFORM, openSides: null, keepOuts: [{ x: 150, y: 0, w: 11, h: 5 }, { x: 0, y: 165, w: 5, h: 5 }], lid: { x: 20, y: 0, w: 150, h: 100 } });
    expect(platformForm.check(values)).toEqual({ 'keepOuts.0': 'Keep-out 1 reaches past the bed.', lid: 'The lid area reaches past the bed.' });
  });
});

describe('a printer\'s form', () => {
  it('knows the usual papers and begins with the one of the unit', () => {
    expect(printerForm.fromItem(PRINTER).paper).toBe('letter');
    expect(printerForm.fromItem({ ...PRINTER, paper: { widthMm: 200, heightMm: 200 } }).paper).toBe('own');
    // ISO 216: A4 is 210 × 297 mm. ANSI/ASME Y14.1: A size is 8.5 × 11 in.
    expect(printerForm.blank('mm')).toMatchObject({ widthMm: 210, heightMm: 297 });
    const letter = printerForm.blank('in');
    expect([letter.widthMm! / 25.4, letter.heightMm! / 25.4]).toEqual([expect.closeTo(8.5, 9), expect.closeTo(11, 9)]);
  });
});

describe('a printer\'s correction', () => {
  it('comes of what a ruler says on the test page: scale = bar / 100 mm, shift = measured − scale · nominal', () => {
    // Bars at 99.5 and 100.2 mm; cross drawn at (30, 40), found at (30.35, 39.9): 30.35 − 0.995 · 30 = 0.5, 39.9 − 1.002 · 40 = −0.18.
    const { scale, shift } = correction({ barX: 99.5, barY: 100.2, crossX: 30.35, crossY: 39.9 });
    expect([scale.x, scale.y, shift.x, shift.y]).toEqual([0.995, 1.002, expect.closeTo(0.5, 9), expect.closeTo(-0.18, 9)]);
  });

  it('measures from the cross where the test page draws it', () => {
    expect(TEST_CROSS_MM).toEqual(DRAWN_CROSS_MM);
  });
});

describe('drawings of gear', () => {
  it('let a sheet hang over the sides away from the corner, but not over the hinge', () => {
    expect(usualOpenSides('top-left', 'left')).toEqual(['right', 'bottom']);
    expect(usualOpenSides('top-right', 'left')).toEqual(['bottom']);
    expect(usualOpenSides('bottom-left', 'top')).toEqual(['right']);
  });

  it('keep every bed, lid and keep-out to proportion and within the frame', () => {
    const { bed, lid, keepOuts } = drawPlatform({ ...PLATFORM, openSides: null }, SHEET);
    const k = bed.w / PLATFORM.widthMm;
    expect(bed.h / PLATFORM.heightMm).toBeCloseTo(k, 9);
    expect(lid).toMatchObject({ w: 150 * k, h: 160 * k });
    expect(lid!.x - bed.x).toBeCloseTo(4 * k, 9);
    expect(keepOuts[0].w).toBeCloseTo(12 * k, 9);
    expect(bed.x).toBeGreaterThanOrEqual(SHEET.paddingPx - 1e-9);
    expect(bed.y + bed.h).toBeLessThanOrEqual(SHEET.heightPx - SHEET.paddingPx + 1e-9);
  });

  it('side by side share one scale, so that the larger looks larger by as much as it is', () => {
    const sizes = [{ widthMm: 160, heightMm: 170 }, { widthMm: 80, heightMm: 85 }];
    const [a, b] = sizes.map((s) => scaleTo(CARD, s.widthMm, s.heightMm, largest(sizes)));
    expect(a.size(160) / b.size(80)).toBeCloseTo(2, 9);
  });

  it('show how far the printer\'s cross misses: scale · drawn + shift, from the middle of the paper', () => {
    const { missMm } = drawPrinter({ ...PRINTER, paper: { widthMm: 200, heightMm: 100 }, scale: { x: 0.99, y: 1.02 }, shift: { x: 0.5, y: 0 } }, SHEET);
    // Middle at (100, 50): x misses by 100 · −0.01 + 0.5 = −0.5, y by 50 · 0.02 = 1.
    expect(missMm).toBeCloseTo(Math.hypot(0.5, 1), 9);
  });

  it('thicken a pile of card by what is on hand', () => {
    const pile = (onHand: number) => drawCardstock({ ...CARDSTOCK, onHand }, CARD).pile.length;
    expect([pile(0), pile(1), pile(2), pile(19), pile(20)]).toEqual([0, 0, 1, 1, 2]);
  });
});
