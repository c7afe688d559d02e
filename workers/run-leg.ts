import { rmSync } from "node:fs";
import { join } from "node:path";
import {
  AppError,
  type CheckpointPiece,
  type HistoryJudgement,
  type LegOrder,
  type LegOutcome,
  type LegProgress,
  type LegReport,
  type Simulation,
} from "../orchestrator/contract/index.ts";
import { addDoubts } from "./add-doubts.ts";
import { readCheckpointFile, writeCheckpointFile } from "./checkpoint-file.ts";
import { createRunJudge } from "./create-run-judge.ts";
import { GrowingRecord } from "./growing-record.ts";
import { readHistoryPieces, writeHistoryFile } from "./history-file.ts";
import { legFailure } from "./leg-failure.ts";
import type { Finding, RunJudge } from "./run-judge.ts";
import type { Solver, SolverTable } from "./solver.ts";

/** What a leg needs of the process around it. */
export interface LegSurroundings {
  readonly solvers: SolverTable;
  /** Milliseconds of a clock that never goes back. */
  readonly clock: () => number;
  /** Milliseconds of processor time that this process has used. */
  readonly cpuClock: () => number;
  /** Lets messages in. */
  readonly breathe: () => Promise<void>;
  /** Whether somebody asked for the leg to end at the next step. */
  readonly stopAsked: () => boolean;
  readonly onProgress: (progress: LegProgress) => void;
}

const PROGRESS_MS = 250;
/** Longest stretch of steps without letting messages in. */
const BREATH_MS = 50;

/** A leg while it is computed. */
interface Leg {
  readonly order: LegOrder;
  readonly simulation: Simulation;
  readonly record: GrowingRecord;
  readonly judge: RunJudge;
  readonly longestSteps: number;
  /** Samples that were stored before this leg. */
  readonly stored: number;
  judgedSteps: number;
  seconds: number;
  cpuSeconds: number;
}

/** Why the leg stops, with what was found. */
interface Stop {
  readonly outcome: LegOutcome;
  readonly message: string | null;
  readonly finding: Finding | null;
}

/**
 * Computes one leg: takes up the attempt where it stands, judges what is stored if the campaign has not yet, steps on until
 * there is a reason to stop, and writes what it did. Expected troubles come back as the report's outcome.
 */
export async function runLeg(order: LegOrder, around: LegSurroundings): Promise<LegReport> {
  try {
    const solver = solverNamed(order.solver, around.solvers);
    const leg = takeUp(order, solver);
    let last: HistoryJudgement | null = null;
    const keep = (finding: Finding | null): void => {
      last = finding === null ? last : addDoubts(finding.judgement, solver.doubts);
    };
    const stop = replay(leg, keep) ?? (await timed(leg, around, () => stepOn(leg, around, keep)));
    keep(stop.finding);
    return writeDown(leg, stop, last);
  } catch (error) {
    for (const file of [historyFile(order), checkpointFile(order)])
      rmSync(join(order.folder, file), { force: true });
    return legFailure(order, error);
  }
}

function takeUp(order: LegOrder, solver: Solver): Leg {
  const simulation = openSimulation(order, solver);
  const names = simulation.channels.map((channel) => channel.name);
  const record = new GrowingRecord(names.length);
  for (const piece of readHistoryPieces(order.folder, order.history, names)) record.append(piece);
  if (order.endedBecause === null && simulation.stepIndex !== record.length)
    throw new AppError(
      "CHECKPOINT_DAMAGED",
      `the saved state is at step ${simulation.stepIndex}, the history ends at ${record.length}`,
      { where: order.checkpoint?.file ?? order.runId, fix: "Restore the run's files from one copy." },
    );
  // Counts of steps belong to the planned time step; a remedy may have changed it.
  const scale = order.rules.dtSeconds / simulation.dtSeconds;
  const longestSteps = Math.max(1, Math.round(order.rules.longestSteps * scale));
  return {
    order,
    simulation,
    record,
    judge: createRunJudge({
      channels: simulation.channels,
      periods: simulation.periods,
      dtSeconds: simulation.dtSeconds,
      accept: order.rules.accept,
      onset: order.rules.onset,
      longestSteps,
      shortestSteps: Math.round(order.rules.shortestSteps * scale),
    }),
    longestSteps,
    stored: record.length,
    judgedSteps: 0,
    seconds: 0,
    cpuSeconds: 0,
  };
}

function solverNamed(name: string, solvers: SolverTable): Solver {
  const solver = solvers.get(name);
  if (solver === undefined)
    throw new AppError("CASE_INVALID", `this machine has no solver "${name}"`, {
      where: "solver",
      fix: `Known here: ${[...solvers.keys()].join(", ")}.`,
    });
  return solver;
}

function openSimulation(order: LegOrder, solver: Solver): Simulation {
  if (order.checkpoint === null) return solver.create(order.inputs);
  return solver.restore(order.inputs, readCheckpointFile(order.folder, order.checkpoint));
}

/** Goes over the stored samples as if they came in now; what this campaign has judged already only brings the monitors up to date. */
function replay(leg: Leg, keep: (finding: Finding) => void): Stop | null {
  const { order, record } = leg;
  const values = new Float64Array(record.channels);
  for (let step = 1; step <= record.length; step++) {
    record.read(step - 1, values);
    const alarm = leg.judge.push(values);
    if (step <= order.judgedSteps) continue;
    const stop = judgeStep(leg, step, alarm, keep);
    if (stop !== null) return stop;
  }
  leg.judgedSteps = record.length;
  if (order.endedBecause === null) return null;
  return { outcome: "failed", message: order.endedBecause, finding: null };
}

async function timed<T>(leg: Leg, around: LegSurroundings, work: () => Promise<T>): Promise<T> {
  const before = around.cpuClock();
  const value = await work();
  leg.cpuSeconds = (around.cpuClock() - before) / 1000;
  return value;
}

async function stepOn(leg: Leg, around: LegSurroundings, keep: (finding: Finding) => void): Promise<Stop> {
  const { simulation, record, order } = leg;
  const values = new Float64Array(record.channels);
  let told = around.clock();
  let breathed = told;
  for (;;) {
    const before = around.clock();
    try {
      simulation.step();
    } catch (error) {
      leg.seconds += (around.clock() - before) / 1000;
      return solverStop(leg, error);
    }
    simulation.sample(values);
    record.push(simulation.stepIndex * simulation.dtSeconds, values);
    const stop = judgeStep(leg, record.length, leg.judge.push(values), keep);
    const now = around.clock();
    leg.seconds += (now - before) / 1000;
    if (stop !== null) return stop;
    if (leg.seconds >= order.budgetSeconds) return { outcome: "budget", message: null, finding: null };
    if (now - told >= PROGRESS_MS) {
      told = now;
      around.onProgress(progressOf(leg));
    }
    if (now - breathed >= BREATH_MS) {
      await around.breathe();
      breathed = around.clock();
    }
    if (around.stopAsked()) return { outcome: "interrupted", message: null, finding: null };
  }
}

/** Everything that may end the run at this step, in this order: an alarm, acceptance, the longest run. */
function judgeStep(leg: Leg, step: number, alarm: boolean, keep: (finding: Finding) => void): Stop | null {
  const { judge, record, longestSteps } = leg;
  leg.judgedSteps = step;
  const soFar = () => record.view(0, step);
  if (alarm) {
    const finding = judge.afterAlarm(soFar());
    return { outcome: "onset", message: finding.judgement.onset?.words ?? null, finding };
  }
  if (step >= longestSteps) {
    const finding = judge.atTheEnd(soFar());
    return { outcome: finding.accepted ? "accepted" : "longest", message: null, finding };
  }
  if (judge.nextLook(step - 1) !== step) return null;
  const finding = judge.look(soFar());
  keep(finding);
  return finding.accepted ? { outcome: "accepted", message: null, finding } : null;
}

/** A step that threw: a value that is no number is an onset like any other, anything else a failure of the solver. */
function solverStop(leg: Leg, error: unknown): Stop {
  const message = error instanceof Error ? error.message : String(error);
  if (error instanceof AppError && error.code === "NON_FINITE") {
    const finding = leg.judge.afterNonFinite(leg.record.view(0, leg.record.length), message);
    return { outcome: "onset", message, finding };
  }
  return {
    outcome: "failed",
    message: `the solver failed at step ${leg.record.length + 1}: ${message}`,
    finding: null,
  };
}

function progressOf(leg: Leg): LegProgress {
  return {
    kind: "progress",
    legId: leg.order.legId,
    step: leg.record.length,
    longestSteps: leg.longestSteps,
    seconds: leg.seconds,
    stepsDone: leg.record.length - leg.stored,
  };
}

function writeDown(leg: Leg, stop: Stop, judgement: HistoryJudgement | null): LegReport {
  const { order, simulation, record } = leg;
  const grew = record.length > leg.stored;
  // A solver that threw in the middle of a step has no state worth keeping.
  const whole = simulation.stepIndex === record.length && stop.outcome !== "failed";
  const cannotGoOn = stop.finding?.judgement.onset?.kind === "non-finite" || stop.outcome === "failed";
  const history = grew ? writeHistory(leg) : null;
  let checkpoint: CheckpointPiece | null = null;
  if (grew && whole && !cannotGoOn)
    checkpoint = writeCheckpointFile(order.folder, checkpointFile(order), {
      bytes: simulation.checkpoint(),
      step: record.length,
    });
  return {
    kind: "report",
    legId: order.legId,
    outcome: stop.outcome,
    message: stop.message,
    code: stop.outcome === "failed" ? "ATTEMPT_FAILED" : null,
    accepted: stop.finding?.accepted ?? false,
    cannotGoOn,
    channels: simulation.channels,
    periods: simulation.periods,
    dtSeconds: simulation.dtSeconds,
    longestSteps: leg.longestSteps,
    steps: record.length,
    stopStep: leg.judgedSteps,
    judgedSteps: leg.judgedSteps,
    seconds: leg.seconds,
    cpuSeconds: leg.cpuSeconds,
    stepsDone: record.length - leg.stored,
    history,
    checkpoint,
    judgement,
  };
}

function writeHistory(leg: Leg): NonNullable<LegReport["history"]> {
  const { order, simulation, record, stored } = leg;
  const file = historyFile(order);
  const head = {
    runId: order.runId,
    attempt: order.attempt,
    legId: order.legId,
    dtSeconds: simulation.dtSeconds,
    channels: simulation.channels.map((channel) => channel.name),
    units: simulation.channels.map((channel) => channel.unit),
  };
  const bytes = writeHistoryFile(join(order.folder, file), head, record.view(stored, record.length));
  return { file, fromStep: stored + 1, toStep: record.length, bytes };
}

const historyFile = (order: LegOrder): string => `${order.files}.history`;
const checkpointFile = (order: LegOrder): string => `${order.files}.state`;
