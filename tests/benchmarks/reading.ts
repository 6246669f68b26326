/**
 * How well pictures are read: the report half of the made corpus, whose wordings, fonts and layouts the engine was not tuned on, by kind of picture
 * and spacing, beside a plain pipeline. Size errors: every width and every height of the sentiments found.
 *
 * The plain pipeline's boxes are scored by overlap with the true boxes, since it knows no parts.
 */
import { boxDistance } from '../../server/engine/reading/gaps.ts';
import { readStampSheet } from '../../server/engine/reading/index.ts';
import { applyHomography } from '../../server/engine/reading/homography.ts';
import { makePicture, type MadePicture, type PictureKind } from './corpus/picture-maker.ts';
import { plainPipeline } from './corpus/plain-pipeline.ts';
import { seeded } from './corpus/random.ts';
import { addScores, groupsOf, scoreGroups, type FoundGroup, type Score } from './corpus/score.ts';
import { makeSheet, type Spacing } from './corpus/sheet-maker.ts';
import type { Half } from './corpus/wordings.ts';

const KINDS: PictureKind[] = ['clean', 'scan', 'photo', 'photo page', 'mirrored'];
const SPACINGS: Spacing[] = ['easy', 'hard'];
const SHEETS = 3;
const SEEDS: Record<Half, number> = { tuning: 1000, report: 700_000 };

export async function run(options: { json?: boolean; half?: Half; sheets?: number } = {}): Promise<{ title: string; columns: string[]; rows: (string | number)[][] }> {
  const half = options.half ?? 'report', sheets = options.sheets ?? SHEETS;
  const rows: (string | number)[][] = [];
  for (const [k, kind] of KINDS.entries()) {
    for (const [s, spacing] of SPACINGS.entries()) {
      const ours: Score[] = [], plain: Score[] = [];
      for (let i = 0; i < sheets; i++) {
        const random = seeded(SEEDS[half] + 1000 * k + 500 * s + i);
        const picture = await makePicture(random, kind, makeSheet(random, half, spacing, { w: random.between(110, 140), h: random.between(120, 165) }));
        ours.push(await readScore(picture));
        plain.push(await plainScore(picture));
      }
      rows.push([kind, spacing, 'engine', ...figures(addScores(ours))], [kind, spacing, 'plain', ...figures(addScores(plain))]);
    }
  }
  return { title: `Reading, ${half} half: ${sheets} sheets of each kind`, columns: ['picture', 'spacing', 'by', 'true', 'found', 'missed', 'split', 'joined', 'false', 'median mm', 'p95 mm', 'max mm'], rows };
}

async function readScore(picture: MadePicture): Promise<Score> {
  const reading = await readStampSheet(picture.file, picture.options);
  return scoreGroups(groupsOf(reading), picture.sheet.sentiments, picture.toSheet);
}

/** Each box of the plain pipeline stands for the true sentiments whose boxes it holds the better part of. */
async function plainScore(picture: MadePicture): Promise<Score> {
  const { groups, toSheet } = await plainPipeline(picture);
  const truth = picture.sheet.sentiments;
  const owners = groups.map((group) => truth.flatMap((sentiment, t) => (holdsPart(group, sentiment.box, toSheet) ? [t] : [])));
  const score: Score = { truths: truth.length, found: 0, missed: 0, split: 0, joined: owners.filter((o) => o.length > 1).length, false: owners.filter((o) => o.length === 0).length, sizeErrorsMm: [] };
  truth.forEach((sentiment, t) => {
    const holding = owners.flatMap((own, g) => (own.includes(t) ? [g] : []));
    if (holding.length === 0) score.missed++;
    else if (holding.length > 1) score.split++;
    else if (owners[holding[0]].length === 1) {
      score.found++;
      score.sizeErrorsMm.push(Math.abs(groups[holding[0]].widthMm! - sentiment.box.w), Math.abs(groups[holding[0]].heightMm! - sentiment.box.h));
    }
  });
  return score;
}

function holdsPart(group: FoundGroup, box: { x: number; y: number; w: number; h: number }, toSheet: MadePicture['toSheet']): boolean {
  const [px] = group.boxesPx, a = applyHomography(toSheet, px), b = applyHomography(toSheet, { x: px.x + px.w, y: px.y + px.h });
  const own = { x: a.x, y: a.y, w: b.x - a.x, h: b.y - a.y };
  const middle = { x: own.x + own.w / 2, y: own.y + own.h / 2, w: 0, h: 0 }, other = { x: box.x + box.w / 2, y: box.y + box.h / 2, w: 0, h: 0 };
  return boxDistance(box, middle) === 0 || boxDistance(own, other) === 0;
}

function figures(score: Score): (string | number)[] {
  const errors = [...score.sizeErrorsMm].sort((a, b) => a - b);
  const at = (share: number) => (errors.length === 0 ? '–' : errors[Math.min(errors.length - 1, Math.floor(share * errors.length))].toFixed(3));
  return [score.truths, score.found, score.missed, score.split, score.joined, score.false, at(0.5), at(0.95), at(1)];
}
