import { describe, expect, it } from "vitest";
import type { ChannelJudgement } from "../../../../orchestrator/contract/index.ts";
import { campaignLoads } from "../../../../orchestrator/night/loads.ts";
import type { CampaignRun, CampaignState } from "../../../../orchestrator/store/rows.ts";
import { steady, type TestRun, testPlan } from "../../../helpers/test-plan.ts";

const judged = (mean: number, more: Partial<ChannelJudgement> = {}): ChannelJudgement => ({
  verdict: "accepted",
  mean,
  plainMean: mean,
  halfWidth: 0.001,
  confidence: 0.95,
  tolerance: 0.01,
  window: { fromIndex: 100, toIndex: 500, fromTime: 1.01, toTime: 5 },
  effectiveSamples: 100,
  period: null,
  warnings: ["variance-changed"],
  samplesNeeded: null,
  hiddenDrift: 0.001,
  tests: [],
  words: "fine",
  ...more,
});

function stateOf(
  runs: readonly (TestRun & { load: ChannelJudgement | null; run?: Partial<CampaignRun> })[],
): CampaignState {
  const plan = testPlan({ runs });
  const list = plan.runs.map((planned, i): CampaignRun => {
    const { load, run } = runs[i]!;
    return {
      campaign: plan.campaign,
      runId: planned.runId,
      number: planned.number,
      place: i,
      role: planned.role,
      label: planned.label,
      varied: planned.varied,
      planned,
      state: "done",
      attempt: 1,
      remedy: null,
      verdict: "accepted",
      judgement:
        load === null ? null : { samples: 500, dt: 0.01, onset: null, notes: [], channels: { load } },
      reason: "every demanded channel is accepted",
      stopCause: "accepted",
      steps: 500,
      longestSteps: 4000,
      legs: 1,
      seconds: 1,
      channels: [{ name: "load", unit: "N", what: "the load", role: "load" }],
      dtSeconds: 0.01,
      ...run,
    };
  });
  return {
    campaign: plan.campaign,
    title: plan.title,
    standing: "done",
    createdMs: 0,
    deadlineMs: null,
    runs: list.length,
    done: list.length,
    verdicts: {},
    computeSeconds: 1,
    plan,
    list,
  };
}

const main = { label: "main", inputs: steady(1) };
const mainId = testPlan({ runs: [main] }).runs[0]!.runId;
const companion = (load: ChannelJudgement | null, run: Partial<CampaignRun> = {}) => ({
  label: "longer wake",
  inputs: steady(2),
  role: "companion" as const,
  companionOf: { runId: mainId, aspect: "wake-length" as const },
  load,
  run,
});

describe("the loads of a campaign", () => {
  it("carry value, interval, window in steps, warnings and the parts of their uncertainty", () => {
    const [row] = campaignLoads(stateOf([{ ...main, load: judged(1.5) }]));
    expect(row).toMatchObject({
      accepted: true,
      channel: "load",
      unit: "N",
      mean: 1.5,
      halfWidth: 0.001,
      window: { fromStep: 101, toStep: 500, fromTime: 1.01, toTime: 5 },
      warnings: ["variance-changed"],
      uncertainty: { statistical: 0.001, sufficiency: [] },
    });
  });

  it("warn where a companion differs by more than the tolerance, and say by how much in any case", () => {
    const near = campaignLoads(stateOf([{ ...main, load: judged(1.5) }, companion(judged(1.508))]));
    expect(near[0]!.warnings).not.toContain("depends-on-wake-length");
    expect(near[0]!.uncertainty.sufficiency[0]!.difference).toBeCloseTo(0.008, 12);
    const far = campaignLoads(stateOf([{ ...main, load: judged(1.5) }, companion(judged(1.489))]));
    expect(far[0]!.accepted).toBe(true);
    expect(far[0]!.warnings).toContain("depends-on-wake-length");
    expect(far[0]!.uncertainty.sufficiency[0]).toMatchObject({
      aspect: "wake-length",
      exceedsTolerance: true,
    });
    expect(far[1]!.warnings).not.toContain("depends-on-wake-length");
  });

  it("say that nothing was compared where the companion has no average to stand on", () => {
    for (const none of [
      companion(null, { state: "waiting", verdict: null }),
      companion(judged(1.5, { verdict: "drifting" }), { verdict: "drifting" }),
    ]) {
      const [row] = campaignLoads(stateOf([{ ...main, load: judged(1.5) }, none]));
      expect(row!.warnings).toContain("wake-length-not-compared");
      expect(row!.uncertainty.sufficiency).toEqual([]);
    }
  });

  it("warn of a window that ends before the wake can have come back, in the time of the planned step", () => {
    const warned = (wakeReturnSteps: number, dtSeconds = 0.01) =>
      campaignLoads(
        stateOf([{ ...main, wakeReturnSteps, load: judged(1), run: { dtSeconds } }]),
      )[0]!.warnings.includes("before-wake-return");
    expect([warned(500), warned(501)]).toEqual([false, true]);
    // A remedy halved the step: the same count of samples is half the time.
    expect([warned(250, 0.005), warned(251, 0.005)]).toEqual([false, true]);
  });

  it("are not accepted because one channel is, and say why not", () => {
    const unstable = { verdict: "unstable", reason: "it grew; no remedy is left" } as const;
    const [row] = campaignLoads(stateOf([{ ...main, load: judged(1), run: unstable }]));
    expect(row).toMatchObject({ accepted: false, verdict: "accepted", reason: "it grew; no remedy is left" });
    const short = judged(1, { verdict: "needs-longer", words: "too short" });
    const [other] = campaignLoads(stateOf([{ ...main, load: short, run: { verdict: "needs-longer" } }]));
    expect(other).toMatchObject({ accepted: false, reason: "too short" });
    const waiting = { state: "waiting", verdict: null, judgement: null } as const;
    const [third] = campaignLoads(stateOf([{ ...main, load: null, run: waiting }]));
    expect(third).toMatchObject({ accepted: false, mean: null, reason: "not begun yet" });
  });

  it("leave out channels that a run does not record", () => {
    expect(campaignLoads(stateOf([{ ...main, load: null, run: { channels: [] } }]))).toHaveLength(1);
    const others = [{ name: "other", unit: "1", what: "", role: "load" as const }];
    expect(campaignLoads(stateOf([{ ...main, load: null, run: { channels: others } }]))).toHaveLength(0);
  });
});
