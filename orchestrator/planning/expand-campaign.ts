import { availableParallelism } from "node:os";
import type { ChannelInfo, Plan, PlannedRun } from "../contract/index.ts";
import { AppError } from "../contract/index.ts";
import { type ResolvedAxis, resolveAxis } from "./axis-values.ts";
import { bookRuns } from "./book-runs.ts";
import type { CaseDescription, DescribeCase } from "./case-description.ts";
import { axesProblems } from "./check-axes.ts";
import { caseCatalogue } from "./check-case.ts";
import { changesProblems, namesProblems, VARIANT_AXIS } from "./check-names.ts";
import { remedyProblems } from "./check-remedies.ts";
import { refuseRunsByMistake } from "./count-runs.ts";
import { AS_GIVEN } from "./draft-sweep.ts";
import { parseFieldPath } from "./field-path.ts";
import { orderOfNight } from "./order-of-night.ts";
import type { Campaign } from "./parse-campaign.ts";
import { readDeadline, wallSeconds } from "./predict-cost.ts";
import { type Problem, problemsError, type TextPlace } from "./problem.ts";
import { campaignSlug, channelProblems, readAccept, readOnset, readTolerance } from "./read-rules.ts";
import { type BookedRun, labelOf } from "./run-book.ts";
import { originOf } from "./run-draft.ts";
import { runLengths } from "./run-lengths.ts";

/** What planning has to be told about the solver and the machine. */
export interface PlanningOptions {
  readonly describe: DescribeCase;
  readonly modelVersion: string;
  /** Speed of the model here, measured or given, in segment–point pairs a second on one core. */
  readonly pairsPerSecond: number;
  /** Whether a person or script has said that a very large number of runs is meant. */
  readonly manyRunsMeant?: boolean;
  /** Workers if the campaign names none; by default one for each core. */
  readonly cores?: number;
}

/**
 * Expands a campaign into its runs, with ids, order and predicted cost. Touches no file.
 *
 * @throws CAMPAIGN_INVALID, CAMPAIGN_EMPTY, CAMPAIGN_TOO_LARGE, each with its place in the campaign file
 */
export function expandCampaign(campaign: Campaign, options: PlanningOptions): Plan {
  const { file, fileName } = campaign;
  refuseProblems(campaign, [...axesProblems(campaign), ...changesProblems(campaign)]);
  refuseRunsByMistake(file, fileName, options.manyRunsMeant === true);
  const axes = file.axes.map((axis, i) => resolveAxis(axis, i, caseCatalogue));
  refuseProblems(campaign, namesProblems(campaign, axes));
  const booked = bookRuns(campaign, axes, options.modelVersion);
  refuseProblems(campaign, remedyProblems(campaign, booked.runs));
  const channels = new Map<string, ChannelInfo>();
  const runs = booked.runs.map((run, i) => {
    const description = describeRun(campaign, run, options.describe);
    for (const channel of description.channels) channels.set(channel.name, channel);
    return plannedRun(campaign, run, i + 1, description, options.pairsPerSecond);
  });
  refuseProblems(campaign, channelProblems(campaign, channels));
  return {
    ...rules(campaign),
    modelVersion: options.modelVersion,
    runs,
    order: orderOfNight(booked.runs),
    axes: axisTable(axes, booked.runs),
    predicted: predicted(runs, file.workers ?? options.cores ?? availableParallelism()),
    warnings: booked.warnings,
  };
}

function refuseProblems(campaign: Campaign, problems: readonly Problem[]): void {
  if (problems.length > 0) throw problemsError("CAMPAIGN_INVALID", campaign.fileName, problems);
}

/** The parts of a plan that the file states and expansion does not touch. */
function rules(campaign: Campaign) {
  const { file, source } = campaign;
  const { sufficiency } = file;
  const own =
    typeof sufficiency === "object" && sufficiency.tolerance !== undefined ? sufficiency.tolerance : null;
  return {
    campaign: campaignSlug(campaign),
    title: file.campaign,
    notes: file.notes,
    solver: file.solver,
    source,
    accept: readAccept(file),
    onset: readOnset(file),
    remedies: file.remedies,
    deadline: file.deadline === undefined ? null : readDeadline(file.deadline),
    workers: file.workers ?? null,
    sufficiencyTolerance: own === null ? null : readTolerance(own),
  };
}

/** What the solver says of a run; a refusal is placed at the field that it names. */
function describeRun(campaign: Campaign, run: BookedRun, describe: DescribeCase): CaseDescription {
  try {
    return describe(run.inputs);
  } catch (error) {
    if (!(error instanceof AppError)) throw error;
    const [field = ""] = (error.where ?? "").split(" ");
    const problem = {
      place: refusalPlace(campaign, run, field),
      field: field === "" ? "case" : `case.${field}`,
      words: `${error.message} (in ${labelOf(run)})`,
    };
    throw problemsError("CAMPAIGN_INVALID", campaign.fileName, [problem], error.fix);
  }
}

function refusalPlace(campaign: Campaign, run: BookedRun, field: string): TextPlace {
  try {
    return campaign.placeOf(originOf(run.draft, parseFieldPath(field) as (string | number)[]));
  } catch {
    // The solver named no field: the run's last change is the nearest that there is.
    return campaign.placeOf(run.draft.trail.at(-1)?.at ?? ["case"]);
  }
}

function plannedRun(
  campaign: Campaign,
  run: BookedRun,
  number: number,
  description: CaseDescription,
  pairsPerSecond: number,
): PlannedRun {
  const { runId, role, varied, inputs, baselineRunId, companionOf } = run;
  const single =
    run.role === "single"
      ? campaign.file.single_cases.find(({ name }) => name === run.draft.name)
      : undefined;
  const longestOfCase = {
    revolutions: single?.longest_revolutions,
    steps: single?.longest_steps,
    seconds: single?.longest_s,
  };
  const lengths = runLengths(campaign.file.accept, longestOfCase, { description, stepScale: run.stepScale });
  return {
    runId,
    number,
    label: labelOf(run),
    role,
    varied,
    baselineRunId,
    companionOf,
    inputs,
    periods: description.periods,
    dtSeconds: description.dtSeconds,
    stepsPerRevolution: description.stepsPerRevolution,
    longestSteps: lengths.longestSteps,
    shortestSteps: lengths.shortestSteps,
    wakeReturnSteps: description.wakeReturnSteps,
    predictedSeconds: description.pairsOver(lengths.longestSteps) / pairsPerSecond,
    warnings: [...description.warnings, ...lengths.warnings],
  };
}

/** Axes with the values that occur, in the order of the file; variants beside the baseline count as an axis. */
function axisTable(axes: readonly ResolvedAxis[], runs: readonly BookedRun[]): Plan["axes"] {
  const sweep = runs.filter((run) => run.role === "sweep");
  const occurring = (name: string) => [
    ...new Set(sweep.map((run) => run.varied[name]).filter((v) => v != null)),
  ];
  const table = axes.map((axis) => {
    const listed = axis.settings.map((setting) => setting.value);
    const found = occurring(axis.name);
    return {
      name: axis.name,
      values: listed.length > 0 ? listed.filter((v) => found.includes(v)) : found.toSorted(byNumber),
    };
  });
  const variants = occurring(VARIANT_AXIS);
  return variants.some((value) => value !== AS_GIVEN)
    ? [...table, { name: VARIANT_AXIS, values: variants }]
    : table;
}

const byNumber = (a: unknown, b: unknown): number => Number(a) - Number(b);

function predicted(runs: readonly PlannedRun[], workers: number): Plan["predicted"] {
  const seconds = runs.map((run) => run.predictedSeconds);
  return { coreSeconds: seconds.reduce((sum, s) => sum + s, 0), wallSeconds: wallSeconds(seconds, workers) };
}
