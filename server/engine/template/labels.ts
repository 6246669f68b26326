/**
 * Reads the names that a plan does not hold, and gives each thing a name where there is none.
 *
 * Input: anything, as it may come from a store or another version. Output: only what has the right type and a usable value; nothing
 * throws, since a missing name must not keep a template from being printed. Nothing is mutated.
 */
import type { TemplateLabels } from './types.ts';

type Fields = Record<string, unknown>;

/** Longer words are no name; they would push the drawing off the page. */
const MAX_NAME = 200;
/** As much as a QR code of a readable size holds. */
const MAX_URL = 400;

export function readLabels(labels: unknown): TemplateLabels {
  const given = fields(labels);
  const stock = fields(given.stock);
  const widthMm = length(stock.widthMm), heightMm = length(stock.heightMm);
  const first = given.firstSetupNumber;
  return {
    batchName: name(given.batchName), cardstockName: name(given.cardstockName), printerName: name(given.printerName),
    sentiments: each(given.sentiments, (s) => ({ name: name(s.name), words: name(s.words), boxOnly: s.boxOnly === true })),
    dies: each(given.dies, (d) => ({ name: name(d.name) })),
    inks: each(given.inks, (i) => ({ name: name(i.name), colour: colour(i.colour), kind: name(i.kind), dryingMinutes: minutes(i.dryingMinutes) })),
    lines: each(given.lines, (l) => ({ title: name(l.title) })),
    benchUrl: address(given.benchUrl),
    ...(widthMm !== undefined && heightMm !== undefined ? { stock: { widthMm, heightMm } } : {}),
    firstSetupNumber: typeof first === 'number' && Number.isInteger(first) && first > 0 ? first : 1,
  };
}

function fields(value: unknown): Fields {
  return typeof value === 'object' && value !== null && !Array.isArray(value) ? (value as Fields) : {};
}

/** Without a prototype: an id such as “constructor” is no name. */
function each<T>(value: unknown, read: (row: Fields) => T): Record<string, T> {
  const rows: Record<string, T> = Object.create(null) as Record<string, T>;
  for (const [id, row] of Object.entries(fields(value))) rows[id] = read(typeof row === 'string' ? { name: row, words: row, title: row } : fields(row));
  return rows;
}

/** One line of printable characters. */
function name(value: unknown): string | undefined {
  if (typeof value !== 'string') return undefined;
  const plain = value.replace(/[\p{Cc}\p{Cf}\p{Zl}\p{Zp}\s]+/gu, ' ').trim();
  return plain === '' ? undefined : plain.length <= MAX_NAME ? plain : `${plain.slice(0, MAX_NAME - 1)}…`;
}

function colour(value: unknown): string | undefined {
  return typeof value === 'string' && /^#[0-9a-f]{6}$/i.test(value) ? value : undefined;
}

function minutes(value: unknown): number | undefined {
  return typeof value === 'number' && Number.isFinite(value) && value >= 0 ? value : undefined;
}

function length(value: unknown): number | undefined {
  return typeof value === 'number' && Number.isFinite(value) && value > 0 ? value : undefined;
}

function address(value: unknown): string | undefined {
  return typeof value === 'string' && value.length <= MAX_URL && /^https?:\/\/[^\s]+$/i.test(value) ? value : undefined;
}

/** 0 → A, 25 → Z, 26 → AA. */
export function letterOf(index: number): string {
  const letter = String.fromCharCode(65 + (index % 26));
  return index < 26 ? letter : letterOf(Math.floor(index / 26) - 1) + letter;
}
