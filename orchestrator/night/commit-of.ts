import type { LegEnding, LegReport, Plan } from "../contract/index.ts";
import type { LegClaim, LegCommit, NextStep } from "../store/store.ts";
import { nextAfterLeg } from "./next-after-leg.ts";

/** What goes into the store after a leg that was reported. */
export function commitOfReport(claim: LegClaim, report: LegReport, plan: Plan, nowMs: number): LegCommit {
  const next = nextAfterLeg(report, {
    accept: plan.accept,
    remedies: plan.remedies,
    remedy: claim.run.remedy,
    inputs: claim.run.planned.inputs,
    shortestSteps: claim.run.planned.shortestSteps,
  });
  const known = report.channels.length > 0;
  return {
    ...base(claim, nowMs, next),
    outcome: report.outcome,
    seconds: report.cpuSeconds,
    computed: known
      ? {
          history: report.history,
          checkpoint: report.checkpoint,
          steps: report.steps,
          channels: report.channels,
          periods: report.periods,
          dtSeconds: report.dtSeconds,
        }
      : null,
    ended: report.cannotGoOn
      ? { because: report.message ?? report.outcome, output: (report.message ?? "").split("\n") }
      : null,
    judgedSteps: report.judgedSteps,
    steps: report.stopStep,
    longestSteps: report.longestSteps,
    judgement: report.judgement,
  };
}

/** What goes into the store when the process that computed a leg died of it: the attempt is at its end. */
export function commitOfDeath(
  claim: LegClaim,
  death: Extract<LegEnding, { kind: "died" }>,
  nowMs: number,
): LegCommit {
  const last = death.output.findLast((line) => line.trim() !== "");
  const because = last === undefined ? death.reason : `${death.reason}; it last said: ${last.trim()}`;
  return {
    ...base(claim, nowMs, { kind: "done", verdict: "failed", reason: because, stopCause: "failed" }),
    outcome: "failed",
    seconds: 0,
    computed: null,
    ended: { because, output: death.output },
    judgedSteps: claim.judgedSteps,
    steps: claim.run.steps,
    longestSteps: claim.run.longestSteps,
    judgement: null,
  };
}

function base(claim: LegClaim, nowMs: number, next: NextStep) {
  return {
    campaign: claim.campaign,
    runId: claim.run.runId,
    attempt: claim.attempt,
    fence: claim.fence,
    fromStep: claim.attemptSteps,
    nowMs,
    next,
  };
}
