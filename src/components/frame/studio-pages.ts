export const STUDIO_PAGES = [
  { route: 'members', label: 'People' },
  { route: 'settings', label: 'Settings' },
  { route: 'activity', label: 'Activity' },
  { route: 'bin', label: 'Bin' },
] as const;
