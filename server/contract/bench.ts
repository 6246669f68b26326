/** The bench: what was pressed, what became of each label, what was cut. A press is named by its run and its number in it, so a repeated request changes nothing. */
import { z } from 'zod';
import { routes } from './route.ts';
import { Id, Instant, Note, StudioItemParams } from './shared.ts';

export const Outcome = z.enum(['clean', 'missed', 'smudged', 'skipped']);
export type Outcome = z.infer<typeof Outcome>;

const Placement = z.int().min(0).max(10_000);
export const ImpressionRecord = z.object({
  placement: Placement, outcome: Outcome,
  /** How often it was stamped again, in all. */
  restamps: z.int().min(0).max(99).default(0),
  reason: z.string().trim().max(120).default(''), note: Note.default(''),
});
export const Impression = ImpressionRecord.extend({ lineId: z.string(), changedBy: z.string(), changedAt: Instant });
export type Impression = z.infer<typeof Impression>;

export const BenchPress = z.object({ runId: Id, number: z.int(), doneBy: z.string(), doneAt: Instant, impressions: z.array(Impression) });
export type BenchPress = z.infer<typeof BenchPress>;

export const Bench = z.object({
  /** The plan that is stamped from: the one with presses, else the newest; null without a plan. */
  planId: Id.nullable(),
  presses: z.array(BenchPress),
  cutPasses: z.array(z.object({ runId: Id, number: z.int(), doneBy: z.string(), doneAt: Instant })),
});
export type Bench = z.infer<typeof Bench>;

const OfPress = { planId: Id, runId: Id, number: z.int().min(1).max(100_000) };

export const benchRoutes = routes({
  'GET /studios/:studioId/batches/:id/bench': { summary: 'All that was recorded at the table', access: 'helper', params: StudioItemParams, response: Bench },
  'PUT /studios/:studioId/batches/:id/bench/presses': {
    summary: 'A press was made; labels not named are clean. A press that is recorded already stays as it is', access: 'helper', params: StudioItemParams,
    body: z.object({ ...OfPress, impressions: z.array(ImpressionRecord).max(200).default([]) }), response: BenchPress,
  },
  'POST /studios/:studioId/batches/:id/bench/presses/undo': { summary: 'The press was not made after all', access: 'helper', params: StudioItemParams, body: z.object(OfPress) },
  'PUT /studios/:studioId/batches/:id/bench/impressions': { summary: 'What became of one label of a recorded press', access: 'helper', params: StudioItemParams, body: z.object({ ...OfPress }).extend(ImpressionRecord.shape), response: BenchPress },
  'PUT /studios/:studioId/batches/:id/bench/cut-passes': { summary: 'A cut pass was made, or was not', access: 'helper', params: StudioItemParams, body: z.object({ ...OfPress, done: z.boolean() }) },
  'POST /studios/:studioId/batches/:id/bench/finish': { summary: 'Everything is made', access: 'helper', params: StudioItemParams },
});
