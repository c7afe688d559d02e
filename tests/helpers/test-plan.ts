import type { Plan, PlannedRun, Remedy } from "../../orchestrator/contract/index.ts";
import { runId } from "../../orchestrator/planning/run-id.ts";
import type { ProcessInputs } from "./test-simulations.ts";

/** What a test says about a run; the rest is filled in. */
export interface TestRun {
  readonly label: string;
  readonly inputs: ProcessInputs;
  readonly longestSteps?: number;
  readonly shortestSteps?: number;
  readonly role?: PlannedRun["role"];
  readonly companionOf?: PlannedRun["companionOf"];
  readonly wakeReturnSteps?: number;
}

/** What a test says about a campaign; the rest is filled in. */
export interface TestCampaign {
  readonly name?: string;
  readonly runs: readonly TestRun[];
  readonly remedies?: readonly Remedy[];
  readonly tolerance?: number;
  readonly deadline?: Plan["deadline"];
}

/** A steady process whose mean is found within a few thousand steps. */
export const steady = (seed: number, more: Partial<ProcessInputs> = {}): ProcessInputs => ({
  mean: 1 + seed / 10,
  phi: 0.5,
  noise: 0.05,
  seed,
  ...more,
});

/** A plan over test processes, as the planner would make it. */
export function testPlan({ name, runs, remedies, tolerance, deadline }: TestCampaign): Plan {
  const planned = runs.map((run, index) => plannedRun(run, index));
  return {
    campaign: name ?? "test",
    title: `Campaign ${name ?? "test"}`,
    notes: "",
    solver: "test-process",
    modelVersion: "test 1",
    source: "",
    runs: planned,
    order: planned.map((run) => run.runId),
    axes: [],
    accept: { channels: [{ name: "load", tolerance: { absolute: tolerance ?? 0.01 } }], confidence: 0.95 },
    onset: { channels: "all", sensitivity: 1, bounds: {} },
    remedies: remedies ?? [],
    deadline: deadline ?? null,
    workers: null,
    predicted: { coreSeconds: runs.length, wallSeconds: runs.length },
    warnings: [],
  };
}

function plannedRun(run: TestRun, index: number): PlannedRun {
  const inputs = { ...run.inputs };
  const longestSteps = run.longestSteps ?? 4000;
  return {
    runId: runId({ solver: "test-process", modelVersion: "test 1", inputs }),
    number: index + 1,
    label: run.label,
    role: run.role ?? "sweep",
    varied: { label: run.label },
    baselineRunId: null,
    companionOf: run.companionOf ?? null,
    inputs,
    periods: [],
    dtSeconds: run.inputs.dtSeconds ?? 0.01,
    stepsPerRevolution: 36,
    longestSteps,
    shortestSteps: run.shortestSteps ?? 0,
    wakeReturnSteps: run.wakeReturnSteps ?? null,
    predictedSeconds: longestSteps * 1e-5,
    warnings: [],
  };
}
