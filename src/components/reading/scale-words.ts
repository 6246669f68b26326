import type { Reading } from '../../../server/engine/reading/types.ts';
import { MM_PER_INCH } from '../../../server/engine/geometry/units.ts';

const SOURCES: Record<NonNullable<Reading['scaleSource']>, string> = {
  typed: 'as typed', ruler: 'by the ruler', sheet: 'by the corners of the sheet', 'photo-page': 'by the photo page', file: 'stated by the file',
};

/** `300 dpi, stated by the file`. */
export function scaleWords(reading: Reading): string {
  if (reading.mmPerPx === null) return 'no scale';
  return `${Math.round(MM_PER_INCH / reading.mmPerPx)} dpi${reading.scaleSource ? `, ${SOURCES[reading.scaleSource]}` : ''}`;
}
