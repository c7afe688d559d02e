import type { Plan, PlannedRun, RunRole, Verdict } from "../contract/index.ts";
import type {
  AttemptDetail,
  CampaignRun,
  CampaignStanding,
  CampaignSummary,
  PastAttempt,
  RunState,
  StopCause,
} from "./rows.ts";

/** Columns of a campaign's run with what is joined to it. */
export interface CampaignRunRow {
  campaign: string;
  run_id: string;
  number: number;
  place: number;
  role: string;
  label: string;
  planned: string;
  run_inputs: string;
  state: string;
  attempt: number;
  remedy: string | null;
  legs: number;
  judged_steps: number;
  steps: number;
  longest_steps: number;
  seconds: number;
  verdict: string | null;
  judgement: string | null;
  reason: string | null;
  stop_cause: string | null;
  channels: string;
  dt_seconds: number;
}

/** Selects CampaignRunRow; a `where` follows. */
export const SELECT_CAMPAIGN_RUN = `
  select c.campaign, c.run_id, c.number, c.place, c.role, c.label, c.planned, r.inputs as run_inputs, c.state,
    c.attempt, c.remedy, c.legs, c.judged_steps, c.steps, c.longest_steps, c.seconds, c.verdict, c.judgement,
    c.reason, c.stop_cause, a.channels, a.dt_seconds
  from midwatch.campaign_runs c
  join midwatch.runs r on r.run_id = c.run_id
  join midwatch.attempts a on a.run_id = c.run_id and a.attempt = c.attempt`;

/** A campaign's run as the rest of the program sees it. */
export function toCampaignRun(row: CampaignRunRow): CampaignRun {
  const planned: PlannedRun = { ...JSON.parse(row.planned), inputs: JSON.parse(row.run_inputs) };
  return {
    campaign: row.campaign,
    runId: row.run_id,
    number: row.number,
    place: row.place,
    role: row.role as RunRole,
    label: row.label,
    varied: planned.varied,
    planned,
    state: row.state as RunState,
    attempt: row.attempt,
    remedy: parsed(row.remedy),
    verdict: row.verdict as Verdict | null,
    judgement: parsed(row.judgement),
    reason: row.reason,
    stopCause: row.stop_cause as StopCause | null,
    steps: row.steps,
    longestSteps: row.longest_steps,
    legs: row.legs,
    seconds: row.seconds,
    channels: JSON.parse(row.channels),
    dtSeconds: row.dt_seconds === 0 ? planned.dtSeconds : row.dt_seconds,
  };
}

/** Columns of a campaign in a list. */
export interface CampaignRow {
  campaign: string;
  title: string;
  plan: string;
  standing: string;
  created_ms: number;
  deadline_ms: number | null;
}

/** Columns that count a campaign's runs. */
export interface VerdictCountRow {
  campaign: string;
  verdict: string | null;
  runs: number;
  done: number;
  seconds: number;
}

/** A campaign in a list, from its row and the counts of its runs. */
export function toCampaignSummary(row: CampaignRow, counts: readonly VerdictCountRow[]): CampaignSummary {
  const own = counts.filter((count) => count.campaign === row.campaign);
  const sum = (pick: (count: VerdictCountRow) => number) => own.reduce((total, c) => total + pick(c), 0);
  const verdicts = own.flatMap((c) => (c.verdict === null ? [] : [[c.verdict as Verdict, c.runs] as const]));
  return {
    campaign: row.campaign,
    title: row.title,
    standing: row.standing as CampaignStanding,
    createdMs: row.created_ms,
    deadlineMs: row.deadline_ms,
    runs: sum((c) => c.runs),
    done: sum((c) => c.done),
    verdicts: Object.fromEntries(verdicts),
    computeSeconds: sum((c) => c.seconds),
  };
}

/** The plan as it is kept: without its runs, which have rows of their own. */
export function planText(plan: Plan): string {
  return JSON.stringify({ ...plan, runs: [] });
}

/** The plan with its runs put back. */
export function toPlan(text: string, runs: readonly CampaignRun[]): Plan {
  return { ...(JSON.parse(text) as Plan), runs: runs.map((run) => run.planned) };
}

/** Columns of an attempt with the remedy it was first computed for. */
export interface AttemptRow {
  attempt: number;
  settings: string;
  steps: number;
  seconds: number;
  ended_because: string | null;
  output: string;
  channels: string;
  periods: string;
  dt_seconds: number;
  legs: number;
}

/** An attempt as the rest of the program sees it. */
export function toAttempt(row: AttemptRow): AttemptDetail {
  return {
    attempt: row.attempt,
    settings: JSON.parse(row.settings),
    steps: row.steps,
    seconds: row.seconds,
    endedBecause: row.ended_because,
    output: JSON.parse(row.output),
    channels: JSON.parse(row.channels),
    periods: JSON.parse(row.periods),
    dtSeconds: row.dt_seconds,
    legs: row.legs,
  };
}

/** Columns of an attempt that a campaign left behind. */
export interface PastAttemptRow {
  campaign: string;
  attempt: number;
  remedy: string | null;
  verdict: string;
  reason: string;
  steps: number;
  judgement: string | null;
}

/** An attempt that a campaign left behind. */
export function toPastAttempt(row: PastAttemptRow): PastAttempt {
  return {
    attempt: row.attempt,
    remedy: parsed(row.remedy),
    verdict: row.verdict as Verdict,
    reason: row.reason,
    steps: row.steps,
    judgement: parsed(row.judgement),
  };
}

function parsed<T>(text: string | null): T | null {
  return text === null ? null : (JSON.parse(text) as T);
}
