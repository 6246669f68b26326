import type { Mount } from '../../api/stamp-sets.ts';

export const MOUNTS: Record<Mount, string> = { clear: 'clear', cling: 'cling', wood: 'wood-mounted' };
export const MOUNT_CHOICES = [{ value: 'clear', label: 'Clear' }, { value: 'cling', label: 'Cling' }, { value: 'wood', label: 'Wood' }] as const satisfies readonly { value: Mount; label: string }[];
/** Said where the mount is chosen and shown. */
export const WOOD_WORDS = 'A wood-mounted stamp cannot hang on the lid of a platform: it can be measured and fitted, but not gang-run.';
