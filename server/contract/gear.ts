/** What stands on the table: stamping platforms, printers, cardstocks and inks. Each list has its search, order and bin. */
import { z } from 'zod';
import { Unit } from './account.ts';
import { routes } from './route.ts';
import { Box, Id, Instant, LengthMm, LengthOrZeroMm, listQuery, Name, Note, page, StudioItemParams, StudioParams, Version } from './shared.ts';

export const Colour = z.string().regex(/^#[\da-f]{6}$/i, 'A colour is written #RRGGBB.').transform((colour) => colour.toUpperCase());

export const Side = z.enum(['left', 'right', 'top', 'bottom']);
export type Side = z.infer<typeof Side>;
export const Corner = z.enum(['top-left', 'top-right', 'bottom-left', 'bottom-right']);
export type Corner = z.infer<typeof Corner>;

const row = { id: Id, version: Version, createdAt: Instant, updatedAt: Instant, deletedAt: Instant.nullable() };

// ---- platforms

const MAX_KEEP_OUTS = 40;
const BedBox = Box.extend({ x: LengthOrZeroMm, y: LengthOrZeroMm, w: LengthMm, h: LengthMm });
const platform = {
  name: Name,
  note: Note,
  /** The bed under the lid, origin at its top left as it lies before you. */
  widthMm: LengthMm,
  heightMm: LengthMm,
  /** The corner that the sheet is pushed into, and the side on which the lid turns. */
  corner: Corner,
  hinge: Side,
  /** Sides over which a sheet may hang; null: those away from the corner, less the hinge's. */
  openSides: z.array(Side).max(4).nullable(),
  /** Where stamps hold on the lid, in bed coordinates; null: the whole bed. */
  lid: BedBox.nullable(),
  /** Where magnets and clips sit, in bed coordinates: no stamp can stand there. */
  keepOuts: z.array(BedBox).max(MAX_KEEP_OUTS, `At most ${MAX_KEEP_OUTS} keep-outs.`),
};
/** A millionth of a mm: sums of typed decimals may miss by less. */
const SUM_MM = 1e-6;
export const PlatformFields = z.object(platform).superRefine((p, context) => {
  const outside = (b: z.infer<typeof BedBox>) => b.x + b.w > p.widthMm + SUM_MM || b.y + b.h > p.heightMm + SUM_MM;
  if (p.lid && outside(p.lid)) context.addIssue({ code: 'custom', path: ['lid'], message: 'The lid area reaches past the bed.' });
  p.keepOuts.forEach((box, i) => {
    if (outside(box)) context.addIssue({ code: 'custom', path: ['keepOuts', i], message: `Keep-out ${i + 1} reaches past the bed.` });
  });
  if (p.openSides && new Set(p.openSides).size !== p.openSides.length) context.addIssue({ code: 'custom', path: ['openSides'], message: 'A side is named twice.' });
});
const NewPlatform = z.object({ ...platform, note: Note.default(''), corner: Corner.default('top-left'), hinge: Side.default('left'), openSides: platform.openSides.default(null), lid: platform.lid.default(null), keepOuts: platform.keepOuts.default([]) });
export const Platform = z.object({ ...platform, name: z.string(), note: z.string(), ...row });
export type Platform = z.infer<typeof Platform>;

// ---- printers

/** A printer that is off by more is set to "fit to page", which has to be switched off instead. */
const Scale = z.number().min(0.9, 'At least 0.9.').max(1.1, 'At most 1.1.');
const Shift = z.number().min(-20, 'At least −20 mm.').max(20, 'At most 20 mm.');
const printer = {
  name: Name,
  note: Note,
  paper: z.object({ widthMm: LengthMm, heightMm: LengthMm }),
  /** White edges that the printer cannot reach. */
  unprintable: z.object({ left: LengthOrZeroMm, right: LengthOrZeroMm, top: LengthOrZeroMm, bottom: LengthOrZeroMm }),
  /** From the printed test page: printed = scale · drawn + shift, on each axis; origin the paper's top left. */
  scale: z.object({ x: Scale, y: Scale }),
  shift: z.object({ x: Shift, y: Shift }),
};
export const PrinterFields = z.object(printer).superRefine((p, context) => {
  if (p.unprintable.left + p.unprintable.right >= p.paper.widthMm) context.addIssue({ code: 'custom', path: ['unprintable', 'right'], message: 'Left and right together leave nothing of the paper.' });
  if (p.unprintable.top + p.unprintable.bottom >= p.paper.heightMm) context.addIssue({ code: 'custom', path: ['unprintable', 'bottom'], message: 'Top and bottom together leave nothing of the paper.' });
});
const NewPrinter = z.object({ ...printer, note: Note.default(''), scale: printer.scale.default({ x: 1, y: 1 }), shift: printer.shift.default({ x: 0, y: 0 }) });
export const Printer = z.object({ ...printer, name: z.string(), note: z.string(), ...row });
export type Printer = z.infer<typeof Printer>;

// ---- cardstocks

/** Which way the fibres run: card folds well along them. */
export const Grain = z.enum(['along-width', 'along-height', 'unknown']);
export type Grain = z.infer<typeof Grain>;
const Sheets = z.int('A whole number.').min(0, 'Not less than 0.').max(100_000, 'At most 100,000.');
const cardstock = {
  name: Name,
  note: Note,
  widthMm: LengthMm,
  heightMm: LengthMm,
  colour: Colour,
  /** Whole sheets on hand. */
  onHand: Sheets,
  grain: Grain,
  /** Grams a square metre, where known. */
  weightGsm: z.number().min(20, 'At least 20 g/m².').max(1000, 'At most 1000 g/m².').nullable(),
};
export const CardstockFields = z.object(cardstock);
const NewCardstock = z.object({ ...cardstock, note: Note.default(''), colour: Colour.default('#FFFFFF'), onHand: Sheets.default(0), grain: Grain.default('unknown'), weightGsm: cardstock.weightGsm.default(null) });
export const Cardstock = z.object({ ...cardstock, name: z.string(), note: z.string(), colour: z.string(), ...row });
export type Cardstock = z.infer<typeof Cardstock>;

// ---- inks

export const InkKind = z.enum(['dye', 'pigment', 'hybrid', 'solvent']);
export type InkKind = z.infer<typeof InkKind>;
const ink = {
  name: Name,
  note: Note,
  kind: InkKind,
  colour: Colour,
  /** Until the next press of the same sheet does not smear it. */
  dryingMinutes: z.number().min(0, 'Must not be negative.').max(10_080, 'At most a week.'),
  /** Room that a pad needs, so that it does not ink the neighbour. */
  clearMm: LengthOrZeroMm,
};
export const InkFields = z.object(ink);
const NewInk = z.object({ ...ink, note: Note.default(''), dryingMinutes: ink.dryingMinutes.default(2), clearMm: LengthOrZeroMm.default(20) });
export const Ink = z.object({ ...ink, name: z.string(), note: z.string(), colour: z.string(), ...row });
export type Ink = z.infer<typeof Ink>;

// ---- routes

/** Any of the fields; what is left out stays. The whole is checked again with the change in it. */
const change = <S extends z.ZodRawShape>(shape: S) => z.object(shape).partial().extend({ version: Version });

const add = { access: 'maker', params: StudioParams, status: 201 } as const;
const list = { access: 'helper', params: StudioParams } as const;
const one = { access: 'helper', params: StudioItemParams } as const;
const alter = { access: 'maker', params: StudioItemParams } as const;

export const gearRoutes = routes({
  'GET /studios/:studioId/platforms': { ...list, summary: 'List stamping platforms', query: listQuery(['name', 'size', 'created', 'updated']), response: page(Platform) },
  'POST /studios/:studioId/platforms': { ...add, summary: 'Add a stamping platform', body: NewPlatform, response: Platform },
  'GET /studios/:studioId/platforms/:id': { ...one, summary: 'One stamping platform', response: Platform },
  'PATCH /studios/:studioId/platforms/:id': { ...alter, summary: 'Change a stamping platform', body: change(platform), response: Platform },
  'DELETE /studios/:studioId/platforms/:id': { ...alter, summary: 'Put a stamping platform in the bin' },
  'POST /studios/:studioId/platforms/:id/restore': { ...alter, summary: 'Take a stamping platform out of the bin', response: Platform },

  'GET /studios/:studioId/printers': { ...list, summary: 'List printers', query: listQuery(['name', 'created', 'updated']), response: page(Printer) },
  'POST /studios/:studioId/printers': { ...add, summary: 'Add a printer', body: NewPrinter, response: Printer },
  'GET /studios/:studioId/printers/:id': { ...one, summary: 'One printer', response: Printer },
  'PATCH /studios/:studioId/printers/:id': { ...alter, summary: 'Change a printer', body: change(printer), response: Printer },
  'DELETE /studios/:studioId/printers/:id': { ...alter, summary: 'Put a printer in the bin' },
  'POST /studios/:studioId/printers/:id/restore': { ...alter, summary: 'Take a printer out of the bin', response: Printer },

  'GET /studios/:studioId/printers/:id/pages/:page': {
    summary: 'A page that is printed once: the test page that shows how true the printer is, or the photo page with its corner markers', access: 'helper', costly: true,
    params: StudioItemParams.extend({ page: z.enum(['test', 'photo']) }), query: z.object({ unit: Unit.default('mm') }), produces: 'application/pdf',
  },

  'GET /studios/:studioId/cardstocks': { ...list, summary: 'List cardstocks', query: listQuery(['name', 'size', 'onHand', 'created', 'updated']), response: page(Cardstock) },
  'POST /studios/:studioId/cardstocks': { ...add, summary: 'Add a cardstock', body: NewCardstock, response: Cardstock },
  'GET /studios/:studioId/cardstocks/:id': { ...one, summary: 'One cardstock', response: Cardstock },
  'PATCH /studios/:studioId/cardstocks/:id': { ...alter, summary: 'Change a cardstock', body: change(cardstock), response: Cardstock },
  'DELETE /studios/:studioId/cardstocks/:id': { ...alter, summary: 'Put a cardstock in the bin' },
  'POST /studios/:studioId/cardstocks/:id/restore': { ...alter, summary: 'Take a cardstock out of the bin', response: Cardstock },

  'GET /studios/:studioId/inks': { ...list, summary: 'List inks', query: listQuery(['name', 'kind', 'created', 'updated']), response: page(Ink) },
  'POST /studios/:studioId/inks': { ...add, summary: 'Add an ink', body: NewInk, response: Ink },
  'GET /studios/:studioId/inks/:id': { ...one, summary: 'One ink', response: Ink },
  'PATCH /studios/:studioId/inks/:id': { ...alter, summary: 'Change an ink', body: change(ink), response: Ink },
  'DELETE /studios/:studioId/inks/:id': { ...alter, summary: 'Put an ink in the bin' },
  'POST /studios/:studioId/inks/:id/restore': { ...alter, summary: 'Take an ink out of the bin', response: Ink },
});
