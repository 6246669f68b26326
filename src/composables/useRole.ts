import { useStudio } from '../stores/studio.ts';
import type { Role } from '../api/studio.ts';

const RANK: Record<Role, number> = { helper: 1, maker: 2, owner: 3 };

/** Which buttons to show. The server decides by itself; this only spares people refusals. */
export function useRole() {
  const studio = useStudio();
  return { can: (least: Role): boolean => studio.role !== null && RANK[studio.role] >= RANK[least] };
}
