import { z } from "zod";
import type { AcceptRule, OnsetRule } from "./plan.ts";

/** A stretch of history on disk: samples of the steps `fromStep` (in) to `toStep` (in), step numbers from 1. */
export const historyPieceSchema = z.object({
  /** Path relative to the data folder. */
  file: z.string().min(1),
  fromStep: z.int().min(1),
  toStep: z.int().min(1),
});

/** A saved state on disk. */
export const checkpointPieceSchema = z.object({
  /** Path relative to the data folder. */
  file: z.string().min(1),
  /** Steps done when it was taken. */
  step: z.int().min(0),
  bytes: z.int().min(0),
  crc: z.int().min(0),
});

const acceptSchema: z.ZodType<AcceptRule> = z.custom<AcceptRule>(
  (value) => typeof value === "object" && value !== null && "channels" in value && "confidence" in value,
);
const onsetSchema: z.ZodType<OnsetRule> = z.custom<OnsetRule>(
  (value) => typeof value === "object" && value !== null && "channels" in value && "sensitivity" in value,
);

/** What one campaign asks of a run; counts are steps of the planned time step and scale with it under a remedy. */
const legRulesSchema = z.object({
  accept: acceptSchema,
  onset: onsetSchema,
  dtSeconds: z.number().positive(),
  longestSteps: z.int().min(1),
  shortestSteps: z.int().min(0),
});

/** Manager to child: compute this stretch. Everything that the leg needs is in it or in the files it names. */
const legOrderSchema = z.object({
  kind: z.literal("leg"),
  /** Unique for every try of every leg. */
  legId: z.string().regex(/^[A-Za-z0-9._-]+$/),
  runId: z.string().min(1),
  attempt: z.int().min(1),
  solver: z.string().min(1),
  inputs: z.record(z.string(), z.unknown()),
  /** Absolute path of the data folder. */
  folder: z.string().min(1),
  /** Path of the files that the leg writes, relative to the folder and without their ending; no other try has the same. */
  files: z.string().regex(/^runs\/[A-Za-z0-9._/-]+$/),
  /** History of the attempt so far, in order and without gaps. */
  history: z.array(historyPieceSchema),
  checkpoint: checkpointPieceSchema.nullable(),
  rules: legRulesSchema,
  /** Steps up to which this campaign has judged the attempt without finding a reason to stop. */
  judgedSteps: z.int().min(0),
  /** Seconds of stepping after which the leg checkpoints and reports. */
  budgetSeconds: z.number().positive(),
  /** Null where the attempt can be continued; else why it cannot, so that only what is stored may be judged. */
  endedBecause: z.string().nullable(),
});

/** A stretch of history on disk. */
export type HistoryPiece = z.infer<typeof historyPieceSchema>;
/** A saved state on disk. */
export type CheckpointPiece = z.infer<typeof checkpointPieceSchema>;
/** An order for one leg. */
export type LegOrder = z.infer<typeof legOrderSchema>;

/** Manager to child: checkpoint and report at the next step. */
const legStopSchema = z.object({ kind: z.literal("stop"), legId: z.string() });

/** Everything that a manager says to a child. */
export const toChildSchema = z.discriminatedUnion("kind", [legOrderSchema, legStopSchema]);
