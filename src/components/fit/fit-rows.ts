/** Rows of the fit table in the order and choice that a person asks for, and as a file for a spreadsheet. Pure. */
import type { Fit } from '../../../server/engine/fit/types.ts';
import { recommendedDie } from '../../../server/engine/fit/verdict.ts';
import type { FitMaterial } from '../../api/dies.ts';

type FitSentiment = FitMaterial['sentiments'][number];
export interface FitTableRow { sentiment: FitSentiment; /** Undefined while it is being worked out. */ fits: Fit[] | undefined; recommended: number | null }
export type FitSort = 'set' | 'name' | 'size' | 'border';
export interface FitChoice { search: string; tag: string; only: 'all' | 'fits' | 'no-die'; sort: FitSort }

export function chosenRows(material: FitMaterial, fits: readonly (Fit[] | undefined)[], choice: FitChoice): FitTableRow[] {
  const areas = material.dies.map((die) => die.areaMm2);
  const rows = material.sentiments.map((sentiment, i): FitTableRow => ({ sentiment, fits: fits[i], recommended: fits[i] ? recommendedDie(fits[i], areas) : null }));
  const text = choice.search.trim().toLowerCase();
  const wanted = rows.filter(({ sentiment, fits: row, recommended }) =>
    (text === '' || `${sentiment.name} ${sentiment.stampSetName} ${sentiment.tags.join(' ')}`.toLowerCase().includes(text))
    && (choice.tag === '' || sentiment.tags.includes(choice.tag))
    && (choice.only === 'all' || row === undefined || (choice.only === 'fits') === (recommended !== null)));
  const bestBorder = (row: FitTableRow) => (row.fits && row.recommended !== null ? row.fits[row.recommended].borderMm : -Infinity);
  if (choice.sort === 'name') wanted.sort((a, b) => a.sentiment.name.localeCompare(b.sentiment.name));
  if (choice.sort === 'size') wanted.sort((a, b) => b.sentiment.widthMm * b.sentiment.heightMm - a.sentiment.widthMm * a.sentiment.heightMm);
  if (choice.sort === 'border') wanted.sort((a, b) => bestBorder(b) - bestBorder(a));
  return wanted;
}

export const tagsOf = (material: FitMaterial): string[] => [...new Set(material.sentiments.flatMap((sentiment) => sentiment.tags))].sort();

/** RFC 4180. Borders in mm; empty where the sentiment does not fit. */
export function fitCsv(rows: readonly FitTableRow[], dieNames: readonly string[]): string {
  const cell = (value: string | number) => (/[",\r\n]/.test(String(value)) || /^[=+\-@]/.test(String(value)) && typeof value === 'string' ? `"${String(value).replace(/"/g, '""').replace(/^([=+\-@])/, "'$1")}"` : String(value));
  const head = ['Stamp set', 'Sentiment', 'Width (mm)', 'Height (mm)', 'Recommended die', ...dieNames.map((name) => `Border in ${name} (mm)`)];
  const lines = rows.map(({ sentiment, fits, recommended }) => [
    sentiment.stampSetName, sentiment.name, sentiment.widthMm.toFixed(2), sentiment.heightMm.toFixed(2), recommended === null ? '' : dieNames[recommended],
    ...dieNames.map((_, i) => (fits?.[i]?.fits ? fits[i].borderMm.toFixed(2) : '')),
  ]);
  return [head, ...lines].map((line) => line.map(cell).join(',')).join('\r\n') + '\r\n';
}
