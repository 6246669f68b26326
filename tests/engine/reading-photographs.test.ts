import { describe, expect, it } from 'vitest';
import { localScale } from '../../server/engine/reading/homography.ts';
import { applyScale, readStampSheet } from '../../server/engine/reading/index.ts';
import { markerRings, PHOTO_PAGE_DICTIONARY, PHOTO_PAGE_MARKERS } from '../../server/engine/reading/photo-page-layout.ts';
import { loadOpenCv } from '../../server/engine/reading/opencv.ts';
import { ringContains } from '../../server/engine/geometry/ring.ts';
import { makePicture, type PictureKind } from '../benchmarks/corpus/picture-maker.ts';
import { seeded } from '../benchmarks/corpus/random.ts';
import { groupsOf, scoreGroups } from '../benchmarks/corpus/score.ts';
import { makeSheet } from '../benchmarks/corpus/sheet-maker.ts';

const made = async (kind: PictureKind, seed: number) => {
  const random = seeded(seed);
  return makePicture(random, kind, makeSheet(random, 'tuning', 'easy', { w: 100, h: 120 }));
};

// Reference: the outlines in the font files, put into perspective before they were drawn.
describe('photographs', () => {
  it('on the photo page: every sentiment within half a millimetre, the scale within 0.3 %', async () => {
    const picture = await made('photo page', 31), reading = await readStampSheet(picture.file, picture.options);
    expect(reading.scaleSource).toBe('photo-page');
    const score = scoreGroups(groupsOf(reading), picture.sheet.sentiments, picture.toSheet);
    expect(score).toMatchObject({ found: score.truths, split: 0, joined: 0, false: 0 });
    expect(Math.max(...score.sizeErrorsMm)).toBeLessThan(0.5);
    const middle = { x: reading.widthPx / 2, y: reading.heightPx / 2 };
    expect(reading.mmPerPx! / localScale(picture.toSheet, middle)).toBeCloseTo(1, 2);
    expect(Math.abs(reading.mmPerPx! / localScale(picture.toSheet, middle) - 1)).toBeLessThan(0.003);
  });

  it('a photo page printed at 98 % by 101 % is reckoned with', async () => {
    const picture = await made('photo page', 31);
    const [plain, scaled] = [await readStampSheet(picture.file, {}), await readStampSheet(picture.file, { photoPageScale: { x: 0.98, y: 1.01 } })];
    expect(scaled.mmPerPx! / plain.mmPerPx!).toBeCloseTo(Math.sqrt(0.98 * 1.01), 3);
  });

  it('with the sheet’s corners given; without them the corners are found and there is no scale yet', async () => {
    const picture = await made('photo', 32), reading = await readStampSheet(picture.file, picture.options);
    const score = scoreGroups(groupsOf(reading), picture.sheet.sentiments, picture.toSheet);
    expect(score).toMatchObject({ found: score.truths, split: 0, joined: 0, false: 0 });
    expect(Math.max(...score.sizeErrorsMm)).toBeLessThan(0.5);

    const bare = await readStampSheet(picture.file, {});
    expect(bare).toMatchObject({ scaleSource: null, mmPerPx: null });
    picture.options.sheet!.cornersPx.forEach((corner, i) => expect(Math.hypot(bare.foundCornersPx![i].x - corner.x, bare.foundCornersPx![i].y - corner.y)).toBeLessThan(3));
    const later = applyScale(bare, picture.options);
    expect(scoreGroups(groupsOf(later), picture.sheet.sentiments, picture.toSheet)).toMatchObject({ found: score.truths, false: 0 });
  });

  it('faces of stamps in a scan read as their impressions do', async () => {
    const picture = await made('mirrored', 33), reading = await readStampSheet(picture.file, picture.options);
    const score = scoreGroups(groupsOf(reading), picture.sheet.sentiments, picture.toSheet);
    expect(score).toMatchObject({ found: score.truths, split: 0, joined: 0, false: 0 });
    expect(Math.max(...score.sizeErrorsMm)).toBeLessThan(0.2);
  });
});

// Reference: OpenCV's own drawing of the dictionary's markers.
describe('the photo page’s markers', () => {
  it('are those of the dictionary, cell by cell', async () => {
    const { cv } = await loadOpenCv();
    const api = cv as unknown as Record<string, never> & {
      Mat: new () => { data: Uint8Array; delete(): void };
      getPredefinedDictionary(name: number): { generateImageMarker(id: number, side: number, image: unknown, border: number): void; delete(): void };
    };
    const dictionary = api.getPredefinedDictionary(api[PHOTO_PAGE_DICTIONARY]);
    for (const marker of PHOTO_PAGE_MARKERS) {
      const image = new api.Mat(), rings = markerRings(marker);
      dictionary.generateImageMarker(marker.id, 6, image, 1);
      for (let row = 0; row < 6; row++) {
        for (let column = 0; column < 6; column++) {
          const middle = { x: marker.centre.x + (column - 2.5) * 2.5, y: marker.centre.y + (row - 2.5) * 2.5 };
          const black = rings.filter((ring) => ringContains(ring, middle)).length % 2 === 1;
          expect(black, `marker ${marker.id}, row ${row}, column ${column}`).toBe(image.data[6 * row + column] === 0);
        }
      }
      image.delete();
    }
    dictionary.delete();
  });
});
