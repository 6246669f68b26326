import type { Request } from 'express';
import { gearRoutes } from '../../contract/gear.ts';
import { feature } from '../../feature.ts';
import type { Deps, Feature } from '../../feature.ts';
import { cardstocks, inks, platforms, printers } from './gear-kinds.ts';
import type { FieldsOf, GearItem, GearKind } from './gear-kinds.ts';
import { FileAnswer } from '../../middleware/mount.ts';
import type { PrinterPageRequest } from './printer-pages.ts';
import { createGearService } from './gear.service.ts';
import type { GearQuery } from './gear.service.ts';

interface InList { params: { studioId: string } }
interface OfItem { params: { studioId: string; id: string } }

/** The six handlers of one kind, named as its routes need them. */
function handlersOf<I extends GearItem>(deps: Deps, kind: GearKind<I>) {
  const gear = createGearService(deps, kind);
  return {
    gear,
    list: ({ params, query }: InList & { query: GearQuery }) => gear.list(params.studioId, query),
    add: ({ params, body }: InList & { body: FieldsOf<I> }) => gear.add(params.studioId, body),
    find: ({ params }: OfItem) => gear.find(params.studioId, params.id),
    change: ({ params, body: { version, ...change } }: OfItem & { body: Partial<FieldsOf<I>> & { version: number } }) => gear.change(params.studioId, params.id, version, change as unknown as Partial<FieldsOf<I>>),
    remove: ({ params, person, req }: OfItem & { person: { id: string }; req: Request }) => gear.remove(params.studioId, params.id, { personId: person.id, address: req.ip ?? 'unknown' }),
    restore: ({ params }: OfItem) => gear.restore(params.studioId, params.id),
  };
}

export function createGear(deps: Deps): Feature {
  const [platform, printer, cardstock, ink] = [handlersOf(deps, platforms), handlersOf(deps, printers), handlersOf(deps, cardstocks), handlersOf(deps, inks)];
  return feature({
    table: gearRoutes,
    handlers: {
      'GET /studios/:studioId/platforms': platform.list,
      'POST /studios/:studioId/platforms': platform.add,
      'GET /studios/:studioId/platforms/:id': platform.find,
      'PATCH /studios/:studioId/platforms/:id': platform.change,
      'DELETE /studios/:studioId/platforms/:id': platform.remove,
      'POST /studios/:studioId/platforms/:id/restore': platform.restore,

      'GET /studios/:studioId/printers': printer.list,
      'POST /studios/:studioId/printers': printer.add,
      'GET /studios/:studioId/printers/:id': printer.find,
      'PATCH /studios/:studioId/printers/:id': printer.change,
      'DELETE /studios/:studioId/printers/:id': printer.remove,
      'POST /studios/:studioId/printers/:id/restore': printer.restore,
      'GET /studios/:studioId/printers/:id/pages/:page': async ({ params, query }) => {
        const printerRow = await printer.gear.find(params.studioId, params.id);
        return new FileAnswer(await deps.engine.run<Uint8Array>('printerPage', { page: params.page, printer: printerRow, unit: query.unit } satisfies PrinterPageRequest), 'application/pdf');
      },

      'GET /studios/:studioId/cardstocks': cardstock.list,
      'POST /studios/:studioId/cardstocks': cardstock.add,
      'GET /studios/:studioId/cardstocks/:id': cardstock.find,
      'PATCH /studios/:studioId/cardstocks/:id': cardstock.change,
      'DELETE /studios/:studioId/cardstocks/:id': cardstock.remove,
      'POST /studios/:studioId/cardstocks/:id/restore': cardstock.restore,

      'GET /studios/:studioId/inks': ink.list,
      'POST /studios/:studioId/inks': ink.add,
      'GET /studios/:studioId/inks/:id': ink.find,
      'PATCH /studios/:studioId/inks/:id': ink.change,
      'DELETE /studios/:studioId/inks/:id': ink.remove,
      'POST /studios/:studioId/inks/:id/restore': ink.restore,
    },
  });
}
