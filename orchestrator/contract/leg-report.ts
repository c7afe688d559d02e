import { z } from "zod";
import type { ChannelInfo, DeclaredPeriod } from "./channel.ts";
import type { HistoryJudgement } from "./judgement.ts";
import { checkpointPieceSchema, historyPieceSchema } from "./leg-order.ts";

/** Why a leg stopped stepping. */
const LEG_OUTCOMES = [
  /** Its seconds were used up; the run goes on. */
  "budget",
  /** It was asked to stop; the run goes on some other time. */
  "interrupted",
  /** Every demanded channel is accepted. */
  "accepted",
  /** A monitor spoke up; the judgement holds the onset and, where it was good enough, the trusted window. */
  "onset",
  /** The longest run is reached; the judgement is final. */
  "longest",
  /** The solver failed in a way that is no onset; the message says how. */
  "failed",
  /** The disk is full; nothing of this leg counts. */
  "disk-full",
  /** Files of the attempt so far cannot be read, or what it was begun with is not here; nothing of this leg counts. */
  "damaged",
] as const;

const channels = z.custom<readonly ChannelInfo[]>((value) => Array.isArray(value));
const periods = z.custom<readonly DeclaredPeriod[]>((value) => Array.isArray(value));
const judgement = z.custom<HistoryJudgement>((value) => typeof value === "object" && value !== null);

/** Child to manager: what the leg did, after its files are safely on disk. */
const legReportSchema = z.object({
  kind: z.literal("report"),
  legId: z.string(),
  outcome: z.enum(LEG_OUTCOMES),
  /** In words, where there is something to say: what failed, which onset. */
  message: z.string().nullable(),
  /** Error code that belongs to `failed`, `disk-full` and `damaged`. */
  code: z.string().nullable(),
  /** Whether every demanded channel is accepted, at the last look or up to an onset. */
  accepted: z.boolean(),
  /** Whether the attempt is at its end: the solver cannot step on from here. */
  cannotGoOn: z.boolean(),
  channels,
  periods,
  dtSeconds: z.number(),
  /** Longest run of this attempt in its own steps. */
  longestSteps: z.int(),
  /** Steps of the attempt on disk once this leg is committed. */
  steps: z.int().min(0),
  /** Step at which the run was stopped by its own averages, an onset or the longest run; else equal to `steps`. */
  stopStep: z.int().min(0),
  /** Steps up to which the record is judged now. */
  judgedSteps: z.int().min(0),
  /** Seconds that the stepping took by the clock, seconds of processor time in them, and steps done. */
  seconds: z.number().min(0),
  cpuSeconds: z.number().min(0),
  stepsDone: z.int().min(0),
  history: historyPieceSchema.extend({ bytes: z.int().min(0) }).nullable(),
  checkpoint: checkpointPieceSchema.nullable(),
  /** Judgement at the last look; null before the first. */
  judgement: judgement.nullable(),
});

/** Child to manager, a few times a second. */
const legProgressSchema = z.object({
  kind: z.literal("progress"),
  legId: z.string(),
  step: z.int().min(0),
  longestSteps: z.int().min(0),
  /** Seconds of stepping in this leg so far, and steps done in them. */
  seconds: z.number().min(0),
  stepsDone: z.int().min(0),
});

/** Child to manager: ready for orders. */
const childReadySchema = z.object({ kind: z.literal("ready"), notice: z.string().nullable() });

/** Everything that a child says to its manager. */
export const fromChildSchema = z.discriminatedUnion("kind", [
  legReportSchema,
  legProgressSchema,
  childReadySchema,
]);

/** Why a leg stopped stepping. */
export type LegOutcome = (typeof LEG_OUTCOMES)[number];
/** What a leg did. */
export type LegReport = z.infer<typeof legReportSchema>;
/** How far a leg is. */
export type LegProgress = z.infer<typeof legProgressSchema>;
