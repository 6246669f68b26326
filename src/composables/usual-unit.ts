import type { Unit } from '../api/account.ts';

/** Regions where rulers on craft tables are in inches; a first guess that the person sees and can change. */
const INCHES = new Set(['US', 'LR', 'MM', 'CA']);

export function usualUnit(languages: readonly string[] = navigator.languages): Unit {
  const region = languages.map((language) => /-([A-Z]{2})\b/.exec(language)?.[1]).find((found) => found !== undefined);
  return region !== undefined && INCHES.has(region) ? 'in' : 'mm';
}
