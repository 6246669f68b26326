/** Gear as the planning kernels take it: what was left to follow by itself is left out. Printers are stored as they take them. */
import type { Platform } from '../../contract/gear.ts';
import type { Platform as PlanPlatform } from '../../engine/gangrun/types.ts';

export function platformForPlan({ widthMm, heightMm, keepOuts, corner, hinge, openSides, lid }: Platform): PlanPlatform {
  return { widthMm, heightMm, keepOuts, corner, hinge, ...(openSides ? { openSides } : {}), ...(lid ? { lid } : {}) };
}
