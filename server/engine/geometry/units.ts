/**
 * Lengths as a person types and reads them, in millimetres or inches.
 *
 * Input of parseLength: any text and the person's unit. Output: millimetres, or a failure with a stable code and a sentence to
 * show beside the field; it never guesses. `108`, `108 mm`, `10.8 cm`, `4.25 in`, `4,25"`, `4 1/4`, `4-1/4"`, `4¼`, `3/8 inch`.
 * A bare number is in the person's unit; a bare fraction means inches, since nobody writes millimetres as fractions.
 * A comma is a decimal comma, never a thousands mark: lengths at a craft table have no thousands.
 *
 * 1 in = 25.4 mm exactly (NIST Special Publication 811, appendix B.8). Nothing is mutated; cost is the length of the text.
 */

export type LengthUnit = 'mm' | 'in';

export const MM_PER_INCH = 25.4;
/** ISO 32000-1 §8.3.2.3: the default user space unit of a page. */
export const POINTS_PER_INCH = 72;

export type LengthFailureCode = 'empty' | 'not-a-length' | 'unknown-unit' | 'two-decimal-marks' | 'zero-denominator' | 'negative' | 'too-long';
export type ParsedLength =
  | { ok: true; mm: number; /** The unit that was meant, typed or taken. */ unit: LengthUnit | 'cm' }
  | { ok: false; code: LengthFailureCode; message: string };

export interface ParseOptions {
  /** A printer's shift may lie to either side; sizes may not. Default false. */
  allowNegative?: boolean;
  /** Default one metre, as long as anything on a card maker's table. */
  maxMm?: number;
}

const DEFAULT_MAX_MM = 1000;
const MM_PER: Record<LengthUnit | 'cm', number> = { mm: 1, cm: 10, in: MM_PER_INCH };
const UNIT_WORDS: Record<string, LengthUnit | 'cm'> = {
  mm: 'mm', millimetre: 'mm', millimetres: 'mm', millimeter: 'mm', millimeters: 'mm',
  cm: 'cm', centimetre: 'cm', centimetres: 'cm', centimeter: 'cm', centimeters: 'cm',
  in: 'in', 'in.': 'in', inch: 'in', inches: 'in', '"': 'in',
};
const EXAMPLES = 'Write it like 108 mm, 4.25 in or 4 1/4.';

export function parseLength(text: string, personsUnit: LengthUnit, options: ParseOptions = {}): ParsedLength {
  const plain = plainText(text);
  if (plain === '') return failure('empty', `A length is needed. ${EXAMPLES}`);
  const parts = /^([+-]?)\s*([\d.,/\s-]*\d[.,]?|[.,]\d+)\s*([^\d\s/+-].*)?$/.exec(plain);
  if (!parts) return failure('not-a-length', `“${text.trim()}” is not a length. ${EXAMPLES}`);
  const [, sign, figures, word] = parts;

  const typedUnit = word === undefined ? undefined : UNIT_WORDS[word.trim().toLowerCase()];
  if (word !== undefined && typedUnit === undefined) return failure('unknown-unit', `“${word.trim()}” is not a unit known here: use mm, cm or in.`);

  const number = readNumber(figures.trim(), text);
  if (!number.ok) return number;
  if (sign === '-' && number.value > 0 && !options.allowNegative) return failure('negative', 'A length cannot be less than 0.');

  const unit = typedUnit ?? (number.fraction ? 'in' : personsUnit);
  const mm = number.value * MM_PER[unit];
  const maxMm = options.maxMm ?? DEFAULT_MAX_MM;
  if (!(mm <= maxMm)) return failure('too-long', `At most ${formatLength(maxMm, unit === 'in' ? 'in' : 'mm')}.`);
  return { ok: true, mm: sign === '-' && mm > 0 ? -mm : mm, unit };
}

/** One spelling for what keyboards and phones produce: real minus signs, typographic inch marks, fraction characters, thin spaces. */
function plainText(text: string): string {
  return text
    // "4¼" must become "4 1/4" before any normalisation, which would make it "41/4".
    .replace(/[¼-¾⅐-⅞]/g, (character) => ` ${character.normalize('NFKC')}`)
    .replace(/[⁄∕]/g, '/')
    .replace(/[−‐-―]/g, '-')
    .replace(/[“”″‟]|''|’’/g, '"')
    .replace(/\s+/g, ' ')
    .trim();
}

type NumberRead = { ok: true; value: number; fraction: boolean } | { ok: false; code: LengthFailureCode; message: string };

function readNumber(figures: string, typed: string): NumberRead {
  // A whole part before a fraction is set off by a space or a hyphen.
  const mixed = /^(?:(\d+)(?:\s*-\s*|\s+))?(\d+)\s*\/\s*(\d+)$/.exec(figures);
  if (mixed) {
    const denominator = Number(mixed[3]);
    if (denominator === 0) return failure('zero-denominator', 'A fraction cannot have 0 below its line.');
    return { ok: true, value: Number(mixed[1] ?? 0) + Number(mixed[2]) / denominator, fraction: true };
  }
  if ((figures.match(/[.,]/g) ?? []).length > 1) return failure('two-decimal-marks', `“${typed.trim()}” has more than one decimal mark. ${EXAMPLES}`);
  if (!/^\d*[.,]?\d*$/.test(figures)) return failure('not-a-length', `“${typed.trim()}” is not a length. ${EXAMPLES}`);
  return { ok: true, value: Number(figures.replace(',', '.')), fraction: false };
}

function failure(code: LengthFailureCode, message: string): { ok: false; code: LengthFailureCode; message: string } {
  return { ok: false, code, message };
}

export interface FormatOptions {
  /** How inches are shown; default fractions. Millimetres are always decimal. */
  inches?: 'fraction' | 'decimal';
  /** Finest fraction of an inch; default 16, as on a ruler. */
  denominator?: 2 | 4 | 8 | 16 | 32 | 64;
  /** Decimals of millimetres (default 1) or of decimal inches (default 2). */
  decimals?: number;
  /** `4 1/4` instead of `4 1/4 in`. */
  withoutUnit?: boolean;
  /** Keep the decimals' zeros, for figures that stand under one another. */
  fixed?: boolean;
}

/** Rounded for reading: 0.1 mm, or 1/16 in. Throws on what is no number, which would otherwise print as a size. */
export function formatLength(mm: number, unit: LengthUnit, options: FormatOptions = {}): string {
  if (!Number.isFinite(mm)) throw new RangeError(`A length must be a finite number, not ${mm}.`);
  const tail = options.withoutUnit ? '' : ` ${unit}`;
  if (unit === 'mm') return decimal(mm, options.decimals ?? 1, options.fixed) + tail;
  const inches = mm / MM_PER_INCH;
  return (options.inches === 'decimal' ? decimal(inches, options.decimals ?? 2, options.fixed) : fraction(inches, options.denominator ?? 16)) + tail;
}

/**
 * For a field that is edited: as short as it can be while parseLength gives the same length back (within 0.001 mm). A size that is
 * a fraction of an inch to 1/64 is shown as one; another, stored from millimetres, as decimal inches, so that saving an untouched
 * form never changes a size.
 */
export function editableLength(mm: number, unit: LengthUnit): string {
  if (unit === 'mm') return formatLength(mm, 'mm', { decimals: 3 });
  const sixtyFourths = (mm / MM_PER_INCH) * 64;
  const isFraction = Math.abs(sixtyFourths - Math.round(sixtyFourths)) < 1e-3;
  return formatLength(mm, 'in', isFraction ? { denominator: 64 } : { inches: 'decimal', decimals: 5 });
}

/** `108 × 64 mm`; the unit is said once. */
export function formatSize(widthMm: number, heightMm: number, unit: LengthUnit, options: FormatOptions = {}): string {
  return `${formatLength(widthMm, unit, { ...options, withoutUnit: true })} × ${formatLength(heightMm, unit, options)}`;
}

function decimal(value: number, decimals: number, fixed = false): string {
  const text = value.toFixed(decimals);
  const short = fixed || !text.includes('.') ? text : text.replace(/\.?0+$/, '');
  return Number(short) === 0 ? short.replace('-', '') : short;
}

function fraction(inches: number, denominator: number): string {
  const units = Math.round(Math.abs(inches) * denominator);
  const sign = inches < 0 && units > 0 ? '-' : '';
  const whole = Math.floor(units / denominator);
  let over = units % denominator, under = denominator;
  if (over === 0) return `${sign}${whole}`;
  while (over % 2 === 0) { over /= 2; under /= 2; }
  return whole === 0 ? `${sign}${over}/${under}` : `${sign}${whole} ${over}/${under}`;
}
