/** Fields of the plan's settings: what they are called and where they stand. Pure. */
import type { Batch } from '../../api/batches.ts';

export type SettingsLength = 'sheetWidthMm' | 'sheetHeightMm' | 'marginMm' | 'gapMm' | 'turnToleranceMm' | 'maxFeedWidthMm';
export type Settings = Record<SettingsLength, number | null> & { platformId: string; turns: Batch['turns']; aim: Batch['aim'] };

export const LENGTHS: readonly { key: SettingsLength; label: string; where: 'sheet' | 'more'; hint?: string; optional?: boolean }[] = [
  { key: 'sheetWidthMm', label: 'Run sheet, width', where: 'sheet' },
  { key: 'sheetHeightMm', label: 'Run sheet, height', where: 'sheet' },
  { key: 'marginMm', label: 'Margin to its edge', where: 'more' },
  { key: 'gapMm', label: 'Between labels', where: 'more' },
  { key: 'turnToleranceMm', label: 'More between turns', where: 'more', hint: 'A turned sheet never lies twice in exactly the same place.' },
  { key: 'maxFeedWidthMm', label: 'Machine takes at most', where: 'more', hint: 'Wider sheets are cut straight first. Empty: any width.', optional: true },
];
export const TURNS = [{ value: 'auto', label: 'Where it helps' }, { value: 'none', label: 'Never' }, { value: 'half', label: 'Half turn' }, { value: 'quarter', label: 'Quarter turns' }] as const;
export const AIMS = [{ value: 'time', label: 'Least time' }, { value: 'sheets', label: 'Fewest sheets' }] as const;

export const settingsFrom = (batch: Batch): Settings => ({
  platformId: batch.platformId ?? '', turns: batch.turns, aim: batch.aim, sheetWidthMm: batch.sheetWidthMm, sheetHeightMm: batch.sheetHeightMm, marginMm: batch.marginMm, gapMm: batch.gapMm,
  turnToleranceMm: batch.turnToleranceMm, maxFeedWidthMm: batch.maxFeedWidthMm,
});

export const platformLabel = (platform: { name: string; widthMm: number; heightMm: number }, showSize: (w: number, h: number) => string): string => `${platform.name}, ${showSize(platform.widthMm, platform.heightMm)}`;
