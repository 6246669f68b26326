export const GEAR_PAGES = [
  { route: 'platforms', label: 'Platforms' },
  { route: 'printers', label: 'Printers' },
  { route: 'cardstocks', label: 'Cardstocks' },
  { route: 'inks', label: 'Inks' },
] as const;

/** Names of the routes of one kind: its list, a new one, one. */
export interface GearRoutes { list: string; add: string; one: string }
export const routesOf = (list: string, one: string): GearRoutes => ({ list, one, add: `new-${one}` });
