/** The four kinds of gear: table, columns and what they are called. The rest of the feature is the same for all of them. */
import type { z } from 'zod';
import { CardstockFields, InkFields, PlatformFields, PrinterFields } from '../../contract/gear.ts';
import type { Cardstock, Ink, Platform, Printer } from '../../contract/gear.ts';
import type { SortBy } from '../../db/paging.ts';

/** What every row has beside the fields of its kind. */
export interface GearItem { id: string; name: string; version: number; createdAt: string; updatedAt: string; deletedAt: string | null }
export type FieldsOf<Item> = Omit<Item, 'id' | 'version' | 'createdAt' | 'updatedAt' | 'deletedAt'>;

export interface GearKind<Item extends GearItem> {
  /** Table, path below the studio, and the noun in the studio's news. */
  table: 'platforms' | 'printers' | 'cardstocks' | 'inks';
  /** As it begins a sentence, and as it stands in the audit log. */
  one: string;
  audit: string;
  columns: readonly string[];
  sorts: Record<string, SortBy>;
  /** Checks the whole of a changed row. */
  fields: z.ZodType<FieldsOf<Item>>;
  toRow(fields: Partial<FieldsOf<Item>>): Record<string, unknown>;
  fromRow(row: Record<string, never>): FieldsOf<Item>;
}

const BY_TIME: Record<string, SortBy> = { name: { sql: 'lower(name)', type: 'text' }, created: { sql: 'created_at', type: 'timestamptz' }, updated: { sql: 'updated_at', type: 'timestamptz' } };
const BY_SIZE: Record<string, SortBy> = { size: { sql: 'width_mm * height_mm', type: 'float8' } };

/** Left out where undefined, so that a change touches only what it names. */
const given = (row: Record<string, unknown>) => Object.fromEntries(Object.entries(row).filter(([, value]) => value !== undefined));
const json = (value: unknown) => (value === undefined ? undefined : value === null ? null : JSON.stringify(value));

export const platforms: GearKind<Platform> = {
  table: 'platforms', one: 'This platform', audit: 'platform', fields: PlatformFields,
  columns: ['name', 'note', 'width_mm', 'height_mm', 'corner', 'hinge', 'open_sides', 'lid', 'keep_outs'],
  sorts: { ...BY_TIME, ...BY_SIZE },
  toRow: (p) => given({ name: p.name, note: p.note, width_mm: p.widthMm, height_mm: p.heightMm, corner: p.corner, hinge: p.hinge, open_sides: p.openSides, lid: json(p.lid), keep_outs: json(p.keepOuts) }),
  fromRow: (r) => ({ name: r.name, note: r.note, widthMm: r.width_mm, heightMm: r.height_mm, corner: r.corner, hinge: r.hinge, openSides: r.open_sides, lid: r.lid, keepOuts: r.keep_outs }),
};

export const printers: GearKind<Printer> = {
  table: 'printers', one: 'This printer', audit: 'printer', fields: PrinterFields,
  columns: ['name', 'note', 'paper_width_mm', 'paper_height_mm', 'unprintable_left_mm', 'unprintable_right_mm', 'unprintable_top_mm', 'unprintable_bottom_mm', 'scale_x', 'scale_y', 'shift_x_mm', 'shift_y_mm'],
  sorts: BY_TIME,
  toRow: (p) => given({
    name: p.name, note: p.note, paper_width_mm: p.paper?.widthMm, paper_height_mm: p.paper?.heightMm,
    unprintable_left_mm: p.unprintable?.left, unprintable_right_mm: p.unprintable?.right, unprintable_top_mm: p.unprintable?.top, unprintable_bottom_mm: p.unprintable?.bottom,
    scale_x: p.scale?.x, scale_y: p.scale?.y, shift_x_mm: p.shift?.x, shift_y_mm: p.shift?.y,
  }),
  fromRow: (r) => ({
    name: r.name, note: r.note, paper: { widthMm: r.paper_width_mm, heightMm: r.paper_height_mm },
    unprintable: { left: r.unprintable_left_mm, right: r.unprintable_right_mm, top: r.unprintable_top_mm, bottom: r.unprintable_bottom_mm },
    scale: { x: r.scale_x, y: r.scale_y }, shift: { x: r.shift_x_mm, y: r.shift_y_mm },
  }),
};

export const cardstocks: GearKind<Cardstock> = {
  table: 'cardstocks', one: 'This cardstock', audit: 'cardstock', fields: CardstockFields,
  columns: ['name', 'note', 'width_mm', 'height_mm', 'colour', 'on_hand', 'grain', 'weight_gsm'],
  sorts: { ...BY_TIME, ...BY_SIZE, onHand: { sql: 'on_hand', type: 'int' } },
  toRow: (c) => given({ name: c.name, note: c.note, width_mm: c.widthMm, height_mm: c.heightMm, colour: c.colour, on_hand: c.onHand, grain: c.grain, weight_gsm: c.weightGsm }),
  fromRow: (r) => ({ name: r.name, note: r.note, widthMm: r.width_mm, heightMm: r.height_mm, colour: r.colour, onHand: r.on_hand, grain: r.grain, weightGsm: r.weight_gsm }),
};

export const inks: GearKind<Ink> = {
  table: 'inks', one: 'This ink', audit: 'ink', fields: InkFields,
  columns: ['name', 'note', 'kind', 'colour', 'drying_minutes', 'clear_mm'],
  sorts: { ...BY_TIME, kind: { sql: 'kind', type: 'text' } },
  toRow: (i) => given({ name: i.name, note: i.note, kind: i.kind, colour: i.colour, drying_minutes: i.dryingMinutes, clear_mm: i.clearMm }),
  fromRow: (r) => ({ name: r.name, note: r.note, kind: r.kind, colour: r.colour, dryingMinutes: r.drying_minutes, clearMm: r.clear_mm }),
};
