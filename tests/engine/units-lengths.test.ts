import { describe, expect, it } from 'vitest';
import { editableLength, formatLength, formatSize, MM_PER_INCH, parseLength, type LengthUnit } from '../../server/engine/geometry/units.ts';

function mmOf(text: string, unit: LengthUnit): number {
  const parsed = parseLength(text, unit);
  if (!parsed.ok) throw new Error(`${text}: ${parsed.message}`);
  return parsed.mm;
}
function codeOf(text: string): string {
  const parsed = parseLength(text, 'mm');
  return parsed.ok ? `ok ${parsed.mm}` : parsed.code;
}

describe('lengths typed by a person', () => {
  // NIST SP 811, appendix B.8: the inch is 25.4 mm exactly.
  it('takes the inch as 25.4 mm exactly', () => expect(MM_PER_INCH).toBe(25.4));

  it.each<[string, LengthUnit, number]>([
    ['108', 'mm', 108], ['4', 'in', 101.6], ['108 mm', 'in', 108], ['108mm', 'in', 108], ['10.8 cm', 'in', 108],
    ['4.25 in', 'mm', 107.95], ['4.25"', 'mm', 107.95], ['4,25 in', 'mm', 107.95], ['4 1/4', 'mm', 107.95], ['4 1/4', 'in', 107.95],
    ['4-1/4"', 'mm', 107.95], ['4 - 1/4 in', 'mm', 107.95], ['4¼', 'mm', 107.95], ['4 ¼″', 'in', 107.95], ['¾', 'mm', 19.05], ['3/8 inch', 'mm', 9.525],
    ['  107,9  ', 'mm', 107.9], ['.5', 'in', 12.7], ['5.', 'mm', 5], ['0', 'mm', 0], ['4 1/4 mm', 'in', 4.25], ['2 INCHES', 'mm', 50.8], ['5\u00a01/2\u201d', 'mm', 139.7], ['1⁄2 in.', 'mm', 12.7],
  ])('reads “%s” of a person who works in %s', (text, unit, mm) => {
    expect(mmOf(text, unit)).toBeCloseTo(mm, 9);
  });

  it.each([
    ['', 'empty'], ['   ', 'empty'], ['wide', 'not-a-length'], ['4 4', 'not-a-length'], ['1/2/3', 'not-a-length'], ['4..2', 'two-decimal-marks'], ['1.000,5', 'two-decimal-marks'],
    ['4 1/0', 'zero-denominator'], ['-3', 'negative'], ['3 ft', 'unknown-unit'], ['3 mm wide', 'unknown-unit'], ['5000', 'too-long'], ['1e400', 'unknown-unit'], ['NaN', 'not-a-length'], ['/4', 'not-a-length'], ['4/', 'not-a-length'],
  ])('refuses “%s” as %s, in words', (text, code) => {
    const parsed = parseLength(text, 'mm');
    expect(parsed.ok ? `ok ${parsed.mm}` : parsed.code).toBe(code);
    if (!parsed.ok) expect(parsed.message).toMatch(/^[“A-Z].*[.]$/s);
  });

  it('takes a minus sign only where a length may lie to either side', () => {
    expect(codeOf('−1.5')).toBe('negative');
    expect(parseLength('−1.5 mm', 'in', { allowNegative: true })).toMatchObject({ ok: true, mm: -1.5 });
    expect(codeOf('-0')).toBe('ok 0');
  });
});

describe('lengths shown', () => {
  it('shows millimetres to a tenth and inches as fractions to a sixteenth', () => {
    expect(formatLength(107.95, 'mm')).toBe('108 mm');
    expect(formatLength(107.94, 'mm')).toBe('107.9 mm');
    expect(formatLength(107.95, 'in')).toBe('4 1/4 in');
    expect(formatLength(139.7, 'in')).toBe('5 1/2 in');
    expect(formatLength(3, 'in')).toBe('1/8 in');
    expect(formatLength(25.3, 'in')).toBe('1 in');
    expect(formatLength(-0.01, 'mm')).toBe('0 mm');
    expect(formatLength(-4.7625, 'in')).toBe('-3/16 in');
    expect(formatLength(107.95, 'in', { inches: 'decimal' })).toBe('4.25 in');
    expect(formatLength(20, 'mm', { fixed: true, withoutUnit: true })).toBe('20.0');
    expect(formatSize(107.95, 139.7, 'in')).toBe('4 1/4 × 5 1/2 in');
  });

  it('gives the same length back from an edited field', () => {
    for (let mm = 0.25; mm < 300; mm += 7.3371) {
      for (const unit of ['mm', 'in'] as const) expect(mmOf(editableLength(mm, unit), unit)).toBeCloseTo(mm, 3);
    }
    expect(editableLength(107.95, 'in')).toBe('4 1/4 in');
    expect(editableLength(108, 'in')).toBe('4.25197 in');
  });

  it('throws rather than print what is no number', () => expect(() => formatLength(NaN, 'mm')).toThrow('NaN'));
});
