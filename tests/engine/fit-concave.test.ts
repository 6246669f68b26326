/**
 * Fits in labels that are not convex, against other people's answers to the special case of one point (`polylabel`, the pole of
 * inaccessibility; `jsts` MaximumInscribedCircle) and against trying every place. `LONG=1` tries 200 pairs instead of 40.
 */
import Coordinate from 'jsts/org/locationtech/jts/geom/Coordinate.js';
import GeometryFactory from 'jsts/org/locationtech/jts/geom/GeometryFactory.js';
import MaximumInscribedCircle from 'jsts/org/locationtech/jts/algorithm/construct/MaximumInscribedCircle.js';
import polylabel from 'polylabel';
import { describe, expect, it } from 'vitest';
import { DIE_SHAPES, startingShape } from '../../server/engine/fit/die-shapes.ts';
import { bestFit, dieOutline, fitTable, usableOutline, type DieGeometry } from '../../server/engine/fit/index.ts';
import { outlineBox } from '../../server/engine/geometry/ring.ts';
import { rotateOutline, translateOutline } from '../../server/engine/geometry/transform.ts';
import type { Outline, Ring } from '../../server/engine/geometry/types.ts';
import { bruteBest, bruteBorder, randomStar, seeded } from './fit-brute-force.ts';

/** What the search promises. */
const PROVEN_MM = 0.02;
const POINT: Outline = { rings: [[{ x: 0, y: 0 }]] };

function own(outline: Outline, rest: Partial<DieGeometry> = {}): DieGeometry {
  return { shape: { kind: 'outline', outline }, ...rest };
}
function box(w: number, h: number, x = 0, y = 0): Ring {
  return [{ x, y }, { x: x + w, y }, { x: x + w, y: y + h }, { x, y: y + h }];
}
/** Artwork about the centre of its box. */
function centred(artwork: Outline): Outline {
  const b = outlineBox(artwork);
  return translateOutline(artwork, -b.x - b.w / 2, -b.y - b.h / 2);
}

describe('a point in a label is its pole of inaccessibility', () => {
  it('in 200 random polygons, as polylabel finds it', () => {
    for (let seed = 1; seed <= 200; seed++) {
      const random = seeded(seed);
      const outline = randomStar(random, 5 + Math.floor(random() * 25), 30 + random() * 80, 20 + random() * 60, 0.3);
      const pole = polylabel([outline.rings[0].map((p): [number, number] => [p.x, p.y])], 0.001);
      const fit = bestFit(POINT, own(outline));
      expect(fit.borderMm, `seed ${seed}`).toBeGreaterThan(pole.distance - PROVEN_MM);
      expect(fit.boundMm, `seed ${seed}`).toBeGreaterThanOrEqual(pole.distance - 1e-9);
      expect(fit.boundMm - fit.borderMm).toBeLessThanOrEqual(PROVEN_MM);
    }
  });

  it('in 40 random polygons, as the jsts largest inscribed circle', () => {
    const factory = new GeometryFactory();
    for (let seed = 301; seed <= 340; seed++) {
      const random = seeded(seed);
      const outline = randomStar(random, 7 + Math.floor(random() * 15), 60, 40, 0.4);
      const [ring] = outline.rings;
      const polygon = factory.createPolygon([...ring, ring[0]].map((p) => new Coordinate(p.x, p.y)));
      const circle = new MaximumInscribedCircle(polygon, 0.001);
      const radius = circle.getRadiusLine().getLength();
      const fit = bestFit(POINT, own(outline));
      expect(Math.abs(fit.borderMm - radius), `seed ${seed}`).toBeLessThan(PROVEN_MM);
    }
  });
});

describe('artwork in a label that is not convex', () => {
  const pairs = process.env.LONG ? 200 : 40;

  it(`is never worse by 0.02 mm than trying every place, and the bound never below it (${pairs} random pairs)`, () => {
    for (let seed = 1; seed <= pairs; seed++) {
      const random = seeded(seed);
      const area = randomStar(random, 9 + Math.floor(random() * 10), 60, 45, 0.55);
      const size = random() < 0.25 ? 1.1 : 0.3 + random() * 0.35;
      const ink = randomStar(random, 6 + Math.floor(random() * 8), 50 * size, 30 * size, 0.4);
      const fit = bestFit(ink, own(area));
      const { w, h } = outlineBox(area);
      const brute = bruteBest(centred(ink), area, { left: 0, right: w, top: 0, bottom: h }, 16, 3);
      expect(fit.borderMm, `seed ${seed}`).toBeGreaterThan(brute.border - PROVEN_MM);
      expect(fit.boundMm, `seed ${seed}`).toBeGreaterThan(brute.border - 1e-9);
      expect(fit.boundMm - fit.borderMm, `seed ${seed}`).toBeLessThanOrEqual(PROVEN_MM);
      // And the place truly has the border that is told.
      const there = bruteBorder(translateOutline(centred(ink), fit.centre.x, fit.centre.y), area, 0.01);
      expect(Math.abs(there - fit.borderMm), `seed ${seed}`).toBeLessThan(0.006);
    }
  }, pairs * 1500);

  it('is as good when label and artwork are turned by 90°, and wherever the artwork lay before', () => {
    for (let seed = 51; seed <= 60; seed++) {
      const random = seeded(seed);
      const area = randomStar(random, 12, 60, 40, 0.5), ink = randomStar(random, 9, 22, 12, 0.4);
      const fit = bestFit(ink, own(area));
      const turned = bestFit(rotateOutline(ink, 90), own(rotateOutline(area, 90)));
      const moved = bestFit(translateOutline(ink, 1234.5, -987), own(translateOutline(area, -40, 7)));
      expect(Math.abs(turned.borderMm - fit.borderMm)).toBeLessThan(PROVEN_MM);
      expect(Math.abs(moved.borderMm - fit.borderMm)).toBeLessThan(PROVEN_MM);
    }
  });

  it('hand-worked: a bar in an L goes into the wider arm', () => {
    // Arms 20 and 16 wide; a bar of 30 × 4 lies in the lower one, 60 long: (20 − 4) / 2 above and below.
    const l: Outline = { rings: [[{ x: 0, y: 0 }, { x: 16, y: 0 }, { x: 16, y: 40 }, { x: 60, y: 40 }, { x: 60, y: 60 }, { x: 0, y: 60 }]] };
    const fit = bestFit({ rings: [box(30, 4)] }, own(l));
    expect(fit.borderMm).toBeGreaterThan(8 - PROVEN_MM);
    expect(fit.borderMm).toBeLessThanOrEqual(8 + 1e-9);
    expect(fit.rotationDeg).toBe(0);
    // Upright it could stand in the other arm, where only (16 − 4) / 2 are left, or across the corner.
    expect(bestFit({ rings: [box(4, 30)] }, own(l)).borderMm).toBeLessThan(8);
  });

  it('keeps off a hole, and counts ink that covers one as outside by the hole\'s radius', () => {
    const tag: DieGeometry = { shape: { kind: 'tag', widthMm: 60, heightMm: 30, shoulderMm: 6, holeMm: 8 } };
    const fit = bestFit({ rings: [box(30, 6)] }, tag);
    const hole = dieOutline(tag).rings[1];
    const ink = { x: fit.centre.x - 15, y: fit.centre.y - 3, w: 30, h: 6 };
    const toHole = Math.min(...hole.map((p) => Math.hypot(Math.max(ink.x - p.x, 0, p.x - ink.x - ink.w), Math.max(ink.y - p.y, 0, p.y - ink.y - ink.h))));
    expect(toHole).toBeGreaterThanOrEqual(fit.borderMm - 0.011);
    expect(fit.borderMm).toBeGreaterThan(7);
    // A plate that covers the whole window of a frame: no edge of it lies outside, its middle does.
    const frame = own({ rings: [box(60, 60), box(10, 10, 25, 25)] });
    const plate = bestFit({ rings: [box(50, 50)] }, frame);
    expect(plate.fits).toBe(false);
    expect(Math.abs(plate.borderMm + 5)).toBeLessThan(PROVEN_MM);
    // A ring of ink round the window does fit: (60 − 40) / 2 outside, (30 − 10) / 2 inside.
    const ring = bestFit({ rings: [box(40, 40), box(30, 30, 5, 5)] }, frame);
    expect(Math.abs(ring.borderMm - 10)).toBeLessThan(PROVEN_MM);
  });

  it('stands with equal margins where the border leaves it free', () => {
    // Between two notched ends only the height binds: left and right are as even as can be.
    const ticket: DieGeometry = { shape: { kind: 'notched', at: 'corners', widthMm: 90, heightMm: 30, notchRadiusMm: 4 } };
    const fit = bestFit({ rings: [box(30, 10)] }, ticket);
    expect(Math.abs(fit.borderMm - 10)).toBeLessThan(PROVEN_MM);
    expect(Math.abs(fit.margins.left - fit.margins.right)).toBeLessThan(0.01);
    expect(Math.abs(fit.margins.top - fit.margins.bottom)).toBeLessThan(0.05);
  });

  it('finds the second room of a label that the stitch line divides', () => {
    // A dumb-bell: rooms of 20 and 26 joined by a neck 4 wide, which a stitch line of 3 closes.
    const bell: Outline = { rings: [[
      { x: 0, y: 3 }, { x: 20, y: 3 }, { x: 20, y: 11 }, { x: 40, y: 11 }, { x: 40, y: 0 }, { x: 66, y: 0 }, { x: 66, y: 26 }, { x: 40, y: 26 }, { x: 40, y: 15 }, { x: 20, y: 15 }, { x: 20, y: 23 }, { x: 0, y: 23 },
    ]] };
    const die = own(bell, { stitchInsetMm: 3 });
    expect(usableOutline(die).rings).toHaveLength(2);
    const fit = bestFit({ rings: [box(10, 10)] }, die);
    expect(Math.abs(fit.borderMm - 5)).toBeLessThan(PROVEN_MM);
    expect(fit.centre.x).toBeCloseTo(53, 1);
  });

  it('says no, below 0, where the stitch line leaves nothing of a forked banner', () => {
    const banner: DieGeometry = { shape: { kind: 'banner', ends: 'two', widthMm: 40, heightMm: 10, forkMm: 4 }, stitchInsetMm: 6 };
    expect(usableOutline(banner).rings).toEqual([]);
    const fit = bestFit({ rings: [box(10, 2)] }, banner);
    expect(fit.verdict).toBe('no');
    expect(fit.borderMm).toBeLessThan(0);
    expect(fit.boundMm).toBeGreaterThanOrEqual(fit.borderMm);
  });

  it('measures ink outside at its farthest', () => {
    // A bar of 50 in a frame of 40 × 20 with a bite of 10 × 4 out of the middle of its top: the ends stand out by 5 each.
    const bitten: Outline = { rings: [[{ x: 0, y: 0 }, { x: 15, y: 0 }, { x: 15, y: 4 }, { x: 25, y: 4 }, { x: 25, y: 0 }, { x: 40, y: 0 }, { x: 40, y: 20 }, { x: 0, y: 20 }]] };
    const fit = bestFit({ rings: [box(50, 4)] }, own(bitten));
    expect(Math.abs(fit.borderMm + 5)).toBeLessThan(PROVEN_MM);
    expect(fit.verdict).toBe('no');
  });
});

describe('a fit table of all shapes', () => {
  it('gives each pair exactly the figures of a fit of its own', () => {
    const random = seeded(77);
    const artworks = [randomStar(random, 30, 40, 12, 0.4), randomStar(random, 12, 25, 20, 0.5), { rings: [box(60, 8)] }];
    const dies = DIE_SHAPES.map((row, i): DieGeometry => ({ shape: startingShape(row.form), ...(i % 2 ? { stitchInsetMm: 1.5 } : {}) }));
    const table = fitTable(artworks, dies);
    artworks.forEach((artwork, i) => dies.forEach((die, j) => expect({ ...table[i][j], verdict: '' }).toEqual({ ...bestFit(artwork, die), verdict: '' })));
  });
});

describe('tilt', () => {
  it('finds the tilt that sets a slanted bar straight in a rectangle, exactly enough to be proven', () => {
    const slanted = rotateOutline({ rings: [box(40, 10)] }, 7);
    const fit = bestFit(slanted, { shape: { kind: 'rectangle', widthMm: 60, heightMm: 20 } }, { tiltDeg: 10 });
    expect(fit.rotationDeg).toBeCloseTo(-7, 1);
    expect(fit.borderMm).toBeGreaterThan(5 - PROVEN_MM);
    expect(fit.boundMm).toBeGreaterThanOrEqual(5 - 1e-9);
    expect(fit.boundMm - fit.borderMm).toBeLessThanOrEqual(PROVEN_MM);
  });

  it('leaves artwork upright in a circle, where no tilt is better', () => {
    expect(bestFit({ rings: [box(30, 8)] }, { shape: { kind: 'oval', widthMm: 50, heightMm: 50 } }, { tiltDeg: 15 }).rotationDeg).toBe(0);
  });

  it('proves 0.02 mm in labels that are not convex, over turns and tilts together', () => {
    const random = seeded(7);
    const area = randomStar(random, 11, 60, 40, 0.6), ink = randomStar(random, 8, 30, 12, 0.5);
    const fit = bestFit(ink, own(area), { tiltDeg: 6, turnsDeg: [0, 180] });
    expect(fit.boundMm - fit.borderMm).toBeLessThanOrEqual(PROVEN_MM);
    for (let turn = -6; turn <= 186; turn += turn === 6 ? 168 : 1) {
      expect(bestFit(ink, own(area), { turnsDeg: [turn] }).borderMm, `${turn}°`).toBeLessThanOrEqual(fit.boundMm + 1e-9);
    }
  });
});
