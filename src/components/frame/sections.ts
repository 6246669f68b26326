/** The sections of a studio, in the order of the work. One whose page is not there is not shown. */
export interface Section {
  label: string;
  /** Name of its first route. */
  route: string;
  /** Addresses below `/s/:studioId/` that belong to it. */
  under: string;
}

export const SECTIONS: readonly Section[] = [
  { label: 'Batches', route: 'batches', under: 'batches' },
  { label: 'Stamp sets', route: 'stamp-sets', under: 'stamp-sets' },
  { label: 'Dies', route: 'dies', under: 'dies' },
  { label: 'Gear', route: 'platforms', under: 'gear' },
  { label: 'Studio', route: 'members', under: 'studio' },
];
