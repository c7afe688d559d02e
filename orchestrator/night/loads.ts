import type { ChannelJudgement } from "../contract/index.ts";
import type { CampaignRun, CampaignState } from "../store/rows.ts";
import type { LoadRow } from "./api.ts";
import { beforeWakeReturn, sufficiencyOf } from "./sufficiency.ts";

/**
 * The averaged loads of a campaign: one row for every run and demanded channel, accepted or not, in the listing's order.
 * Whoever prints them leaves out the numbers of what is not accepted unless asked.
 */
export function campaignLoads(state: CampaignState): LoadRow[] {
  const companions = new Map<string, CampaignRun[]>();
  for (const run of state.list) {
    const of = run.planned.companionOf?.runId;
    if (of !== undefined) companions.set(of, [...(companions.get(of) ?? []), run]);
  }
  return state.list.flatMap((run) =>
    demandedOf(run, state).map((name) =>
      loadRow(run, name, state.plan.accept.confidence, companions.get(run.runId) ?? []),
    ),
  );
}

/** Demanded channels that the run has; before its first leg nobody knows, and all are listed. */
function demandedOf(run: CampaignRun, { plan }: CampaignState): string[] {
  const names = plan.accept.channels.map((channel) => channel.name);
  if (run.channels.length === 0) return names;
  return names.filter((name) => run.channels.some((channel) => channel.name === name));
}

function loadRow(
  run: CampaignRun,
  name: string,
  confidence: number,
  companions: readonly CampaignRun[],
): LoadRow {
  const judged = run.judgement?.channels[name] ?? null;
  const info = run.channels.find((channel) => channel.name === name);
  const { sufficiency, warnings } = sufficiencyOf(run, name, companions);
  const window = judged?.window ?? null;
  const early = window !== null && beforeWakeReturn(run, window.toIndex) ? ["before-wake-return"] : [];
  return {
    campaign: run.campaign,
    runId: run.runId,
    number: run.number,
    label: run.label,
    role: run.role,
    varied: run.varied,
    channel: name,
    unit: info?.unit ?? "",
    what: info?.what ?? "",
    accepted: run.verdict === "accepted" && judged?.verdict === "accepted",
    verdict: judged?.verdict ?? null,
    runVerdict: run.verdict,
    reason: reasonOf(run, judged),
    mean: judged?.mean ?? null,
    halfWidth: judged?.halfWidth ?? null,
    plainMean: judged?.plainMean ?? null,
    confidence: judged?.confidence ?? confidence,
    tolerance: judged?.tolerance ?? null,
    effectiveSamples: judged?.effectiveSamples ?? null,
    window: window === null ? null : windowInSteps(window),
    warnings: [...(judged?.warnings ?? []), ...warnings, ...early],
    remedy: run.remedy,
    stopCause: run.stopCause,
    attempt: run.attempt,
    steps: run.steps,
    uncertainty: { statistical: judged?.halfWidth ?? null, sufficiency },
  };
}

function windowInSteps(window: NonNullable<ChannelJudgement["window"]>): NonNullable<LoadRow["window"]> {
  const { fromIndex, toIndex, fromTime, toTime } = window;
  return { fromStep: fromIndex + 1, toStep: toIndex, fromTime, toTime };
}

function reasonOf(run: CampaignRun, judged: ChannelJudgement | null): string {
  if (run.state === "waiting") return "not begun yet";
  if (run.state === "running") return `not done yet: step ${run.steps} of at most ${run.longestSteps}`;
  // A channel may be fine in a run that is not: then the run's reason is the one that counts.
  const own = judged !== null && judged.verdict !== "accepted" && run.verdict !== "failed";
  return own ? judged.words : (run.reason ?? "");
}
