/** Plans of a batch: what is stamped where, press by press, and how good that is. */
import { z } from 'zod';
import type { CutPlan } from '../engine/cutplan/types.ts';
import type { Placement, RunOrder, RunPlan, RunTotals } from '../engine/gangrun/types.ts';
import { Cut } from './batches.ts';
import { InkKind } from './gear.ts';
import { routes } from './route.ts';
import { Id, Instant, JobAccepted, StudioItemParams } from './shared.ts';

const Figure = z.object({ setups: z.int(), presses: z.int(), sheets: z.int(), cutPasses: z.int(), minutes: z.number() });
export const PlanTotals = Figure.extend({ wastePercent: z.number() });
export type PlanTotals = RunTotals;
export const MadeHow = z.enum(['planned', 'around-pins', 'by-hand', 'alternative']);
export type MadeHow = z.infer<typeof MadeHow>;

export const PlanSummary = z.object({
  id: Id, number: z.int(), madeHow: MadeHow, madeBy: z.string(), createdAt: Instant,
  /** Printed or stamped from: kept as it is for good. */
  usedAt: Instant.nullable(),
  totals: PlanTotals, atLeast: Figure, labels: z.int(), stopped: z.boolean(),
});
export type PlanSummary = z.infer<typeof PlanSummary>;

/** What the planner's ids are called, as it was when the plan was made. */
export const PlanNames = z.object({
  sentiments: z.record(z.string(), z.object({ name: z.string(), words: z.string() })),
  dies: z.record(z.string(), z.object({ name: z.string() })),
  inks: z.record(z.string(), z.object({ name: z.string(), colour: z.string(), kind: InkKind.nullable(), dryingMinutes: z.number() })),
  lines: z.record(z.string(), z.object({ title: z.string(), quantity: z.int(), overs: z.int(), cut: Cut })),
});
export type PlanNames = z.infer<typeof PlanNames>;

export const Unplaced = z.object({ lineId: z.string(), title: z.string(), code: z.string(), message: z.string() });
export type Unplaced = z.infer<typeof Unplaced>;

export const ALTERNATIVES = ['time', 'sheets', 'cut-passes'] as const;
export const AlternativeKind = z.enum(ALTERNATIVES);
export type AlternativeKind = z.infer<typeof AlternativeKind>;

export const PlanRun = z.object({
  id: Id,
  cardstock: z.object({ id: Id, name: z.string(), colour: z.string() }).nullable(),
  order: z.custom<RunOrder>(),
  plan: z.custom<RunPlan>(),
  names: PlanNames,
  unplaced: z.array(Unplaced),
  /** In plain words: why so many setups and sheets, and what would save some. */
  explanations: z.array(z.string()),
});
export type PlanRun = z.infer<typeof PlanRun>;

export const PlanSetup = z.object({ id: Id, runId: Id, number: z.int(), position: z.int() });
export type PlanSetup = z.infer<typeof PlanSetup>;

export const Plan = PlanSummary.extend({
  batchId: Id,
  outdated: z.boolean(),
  runs: z.array(PlanRun),
  /** Numbered through all runs. */
  setups: z.array(PlanSetup),
  alternatives: z.array(z.object({ kind: AlternativeKind, totals: PlanTotals, chosen: z.boolean() })),
  /** Against the version before. */
  changes: z.array(z.string()),
});
export type Plan = z.infer<typeof Plan>;

const PlanParams = z.object({ studioId: Id, id: Id, planId: Id });

const PinnedPlacement = z.object({
  id: z.int().min(0).max(10_000), stamps: z.array(z.object({ stampId: z.string().max(80), copy: z.int().min(1).max(99) })).min(1).max(6), lineIds: z.array(z.string().max(80)).min(1).max(60),
  x: z.number().min(-2000).max(2000), y: z.number().min(-2000).max(2000), rotationDeg: z.number().min(-3600).max(3600),
}) satisfies z.ZodType<Placement>;
export const PinnedRun = z.object({ cardstockId: Id.nullable(), pinned: z.array(z.object({ setup: z.int().min(0).max(200), placement: PinnedPlacement })).max(600) });
export type PinnedRun = z.infer<typeof PinnedRun>;

export const StockPiece = z.object({ what: z.string(), widthMm: z.number(), heightMm: z.number(), quantity: z.int() });
export const StockCutting = z.object({
  cardstock: z.object({ id: Id, name: z.string(), colour: z.string(), widthMm: z.number(), heightMm: z.number(), onHand: z.int() }),
  pieces: z.array(StockPiece),
  cutPlan: z.custom<CutPlan>().nullable(),
  /** Why there is none. */
  problem: z.string().nullable(),
});
export type StockCutting = z.infer<typeof StockCutting>;

/** Result of the job that tries run sheets; best for the batch's aim first. */
export const SheetComparison = z.object({
  items: z.array(z.object({ widthMm: z.number(), heightMm: z.number(), /** Whole sheets of cardstock. */ stockSheets: z.int(), sheets: z.int(), presses: z.int(), minutes: z.number(), unplaced: z.int() })),
});
export type SheetComparison = z.infer<typeof SheetComparison>;

export const planRoutes = routes({
  'GET /studios/:studioId/batches/:id/plans': { summary: 'Versions of the plan, newest first', access: 'helper', params: StudioItemParams, response: z.object({ items: z.array(PlanSummary) }) },
  'POST /studios/:studioId/batches/:id/plans': {
    summary: 'Plan the batch, round the pinned places where some are given', access: 'maker', costly: true, params: StudioItemParams, status: 202,
    body: z.object({
      pinned: z.array(PinnedRun).max(20).default([]),
      /** Every place is pinned: a layout made by hand, to be kept as it is. */
      byHand: z.boolean().default(false),
      /** Multiplies the search. */
      effort: z.number().min(0.1).max(10).default(1),
    }),
    response: JobAccepted,
  },
  'POST /studios/:studioId/batches/:id/plans/stop': { summary: 'End the planning under way with the best plan so far', access: 'maker', params: StudioItemParams },
  'POST /studios/:studioId/batches/:id/sheet-sizes': { summary: 'Try the run sheets that the cardstock gives and the platform takes', access: 'maker', costly: true, params: StudioItemParams, status: 202, response: JobAccepted },
  'GET /studios/:studioId/batches/:id/plans/:planId': { summary: 'One plan', access: 'helper', params: PlanParams, response: Plan },
  'POST /studios/:studioId/batches/:id/plans/:planId/choose': {
    summary: 'Take an alternative of the plan', access: 'maker', params: PlanParams, body: z.object({ alternative: AlternativeKind }), response: Plan,
  },
  'GET /studios/:studioId/batches/:id/plans/:planId/stock': { summary: 'How the run sheets are cut from the cardstock on hand', access: 'helper', params: PlanParams, response: z.object({ items: z.array(StockCutting) }) },
});

