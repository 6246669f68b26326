/** Dies drawn inside one another, as a nested set lies: paths about one middle, mm. Pure. A die that cannot be drawn is left out. */
import { dieOutline, usableOutline } from '../../../server/engine/fit/die-outline.ts';
import { checkDie } from '../../../server/engine/fit/die-shapes.ts';
import type { DieGeometry } from '../../../server/engine/fit/types.ts';
import { growOutline } from '../../../server/engine/geometry/offset.ts';
import { outlineBox } from '../../../server/engine/geometry/ring.ts';
import { outlinePath } from '../sheet/outline-path.ts';

export interface NestedDie { cut: string; stitch: string | null; rim: string | null; transform: string }
export interface NestedPicture { dies: NestedDie[]; viewBox: string; widthMm: number; heightMm: number }

const AIR_MM = 3;

export function nestedPicture(geometries: readonly DieGeometry[]): NestedPicture | null {
  const drawn = geometries.filter((geometry) => checkDie(geometry).length === 0).map((geometry) => {
    const outline = dieOutline(geometry);
    const { w, h } = outlineBox(outline);
    return {
      w, h, cut: outlinePath(outline), transform: `translate(${-w / 2} ${-h / 2})`,
      stitch: geometry.stitchInsetMm ? outlinePath(usableOutline(geometry)) : null,
      rim: geometry.rimMm ? outlinePath(growOutline(outline, geometry.rimMm)) : null,
    };
  });
  if (drawn.length === 0) return null;
  const rim = Math.max(...geometries.map((geometry) => geometry.rimMm ?? 0));
  const widthMm = Math.max(...drawn.map((die) => die.w)), heightMm = Math.max(...drawn.map((die) => die.h));
  const w = widthMm + 2 * (AIR_MM + rim), h = heightMm + 2 * (AIR_MM + rim);
  return { dies: drawn.sort((a, b) => b.w * b.h - a.w * a.h), viewBox: `${-w / 2} ${-h / 2} ${w} ${h}`, widthMm, heightMm };
}
