import { describe, expect, it } from "vitest";
import type { ChannelJudgement, HistoryJudgement, Verdict } from "../../../../orchestrator/contract/index.ts";
import { legPriority } from "../../../../orchestrator/night/leg-priority.ts";
import { nextAfterLeg, type RunSituation } from "../../../../orchestrator/night/next-after-leg.ts";
import {
  predictedEndMs,
  type RunPace,
  secondsPerStep,
  stepsNeeded,
} from "../../../../orchestrator/night/night-speed.ts";
import { resolveDeadline } from "../../../../orchestrator/night/resolve-deadline.ts";
import { runVerdict } from "../../../../orchestrator/night/run-verdict.ts";

const channel = (verdict: Verdict, more: Partial<ChannelJudgement> = {}): ChannelJudgement => ({
  verdict,
  mean: 1,
  plainMean: 1,
  halfWidth: 0.01,
  confidence: 0.95,
  tolerance: 0.02,
  window: null,
  effectiveSamples: 100,
  period: null,
  warnings: [],
  samplesNeeded: null,
  hiddenDrift: null,
  tests: [],
  words: `it is ${verdict}`,
  ...more,
});
const judgement = (channels: HistoryJudgement["channels"]): HistoryJudgement => ({
  samples: 100,
  dt: 0.01,
  onset: null,
  notes: [],
  channels,
});
const accept = {
  confidence: 0.95,
  channels: ["CN", "CT", "CQ"].map((name) => ({ name, tolerance: { absolute: 0.02 } })),
};

describe("the verdict of a run", () => {
  it("is that of its worst demanded channel, and says which", () => {
    const mixed = { CN: channel("accepted"), CT: channel("needs-longer"), CQ: channel("drifting") };
    expect(runVerdict(judgement(mixed), accept)).toEqual({
      verdict: "drifting",
      words: "CQ: it is drifting",
    });
    const fine = { CN: channel("accepted"), CT: channel("accepted"), CQ: channel("accepted") };
    expect(runVerdict(judgement(fine), accept).verdict).toBe("accepted");
  });

  it("asks nothing of a channel that the run does not record, and waits when nothing was judged", () => {
    expect(runVerdict(judgement({ CN: channel("accepted") }), accept).verdict).toBe("accepted");
    expect(runVerdict(judgement({}), accept).verdict).toBe("needs-longer");
    expect(runVerdict(null, accept).verdict).toBe("needs-longer");
  });
});

describe("what happens after a leg", () => {
  const situation: RunSituation = {
    accept,
    remedies: [
      { name: "larger core", set: { core: 2 }, cost: "blurs the tips" },
      { name: "the same again", set: { core: 2 }, cost: "nothing" },
      { name: "shorter wake", set: { "wake.rows": 20 }, cost: "less sink" },
    ],
    remedy: null,
    inputs: { core: 1, wake: { rows: 75 } },
    shortestSteps: 50,
  };
  const leg = { message: null, accepted: false, judgement: null, stopStep: 100 };

  it("goes on while its seconds were used up or it was interrupted", () => {
    for (const outcome of ["budget", "interrupted"] as const)
      expect(nextAfterLeg({ ...leg, outcome }, situation)).toEqual({ kind: "continue" });
  });

  it("tries the remedies in order, each on the case as planned, and passes over one that changes nothing new", () => {
    const first = nextAfterLeg({ ...leg, outcome: "onset", message: "it grew" }, situation);
    expect(first).toMatchObject({
      kind: "next-attempt",
      reason: "it grew",
      inputs: { core: 2, wake: { rows: 75 } },
    });
    if (first.kind !== "next-attempt") throw new Error("no attempt");
    const second = nextAfterLeg({ ...leg, outcome: "onset" }, { ...situation, remedy: first.remedy });
    expect(second).toMatchObject({
      remedy: { name: "shorter wake" },
      inputs: { core: 1, wake: { rows: 20 } },
    });
    if (second.kind !== "next-attempt") throw new Error("no attempt");
    const last = nextAfterLeg({ ...leg, outcome: "onset" }, { ...situation, remedy: second.remedy });
    expect(last).toMatchObject({ kind: "done", verdict: "unstable", stopCause: "onset" });
  });

  it("keeps what precedes an onset when it is long enough, and then tries no remedy", () => {
    const next = nextAfterLeg({ ...leg, outcome: "onset", message: "it grew", accepted: true }, situation);
    expect(next).toMatchObject({ kind: "done", verdict: "accepted", stopCause: "onset" });
  });

  it("says at the longest run what is missing", () => {
    const missing = { CN: channel("accepted"), CT: channel("accepted"), CQ: channel("needs-longer") };
    const next = nextAfterLeg({ ...leg, outcome: "longest", judgement: judgement(missing) }, situation);
    expect(next).toMatchObject({
      verdict: "needs-longer",
      reason: "longest run reached; CQ: it is needs-longer",
    });
  });

  it("accepts nothing before the shortest run, even if the longest comes first", () => {
    const fine = { CN: channel("accepted"), CT: channel("accepted"), CQ: channel("accepted") };
    const next = nextAfterLeg({ ...leg, outcome: "longest", judgement: judgement(fine) }, situation);
    expect(next).toMatchObject({ kind: "done", verdict: "needs-longer" });
  });

  it("gives up a solver that failed", () => {
    expect(nextAfterLeg({ ...leg, outcome: "failed", message: "singular" }, situation)).toEqual({
      kind: "done",
      verdict: "failed",
      reason: "singular",
      stopCause: "failed",
    });
  });
});

describe("the place of a leg", () => {
  const later = { legs: 1, place: 0, secondsNeeded: 10, secondsLeft: null };

  it("puts every first leg before any second one, in the order of the night", () => {
    const first = (place: number) => legPriority({ ...later, legs: 0, place });
    expect(first(0)).toBeLessThan(first(1));
    expect(first(2_000_000)).toBeLessThan(legPriority({ ...later, secondsNeeded: 0 }));
    expect(first(0)).toBeGreaterThanOrEqual(1);
  });

  it("then prefers what needs least, and puts what cannot be done before the deadline last", () => {
    const needing = (secondsNeeded: number | null, secondsLeft: number | null = null) =>
      legPriority({ ...later, secondsNeeded, secondsLeft });
    expect(needing(5)).toBeLessThan(needing(6));
    expect(needing(600, 500)).toBeGreaterThan(needing(null, 500));
    expect(needing(1e9, 1)).toBeLessThan(2_000_000);
  });
});

describe("the pace of the night", () => {
  const run = (more: Partial<RunPace> = {}): RunPace => ({
    done: false,
    steps: 0,
    longestSteps: 100,
    measured: { steps: 0, seconds: 0 },
    predictedPerStep: 1,
    ...more,
  });
  const night = { correction: 1, workers: 2, nowMs: 0, deadlineMs: null };

  it("believes what was measured on the run, else the prediction times how far it was off", () => {
    expect(secondsPerStep(run({ measured: { steps: 10, seconds: 5 } }), 3)).toBe(0.5);
    expect(secondsPerStep(run(), 3)).toBe(3);
  });

  it("ends when the work is shared out, but not before the longest run alone: 3 runs of 100 s on 2 workers take 150 s", () => {
    expect(predictedEndMs([run(), run(), run()], night)).toBe(150_000);
    expect(predictedEndMs([run(), run({ longestSteps: 400 })], night)).toBe(400_000);
    expect(predictedEndMs([run(), run(), run()], { ...night, deadlineMs: 9000 })).toBe(9000);
    expect(predictedEndMs([run({ done: true })], night)).toBeNull();
  });

  it("knows from the last look how many steps are still needed", () => {
    const at = { steps: 40, longestSteps: 100 };
    const look = judgement({
      CN: channel("accepted"),
      CT: channel("needs-longer", { samplesNeeded: [50, 70] }),
    });
    expect(stepsNeeded(look, ["CN", "CT"], at)).toBe(20);
    expect(stepsNeeded(null, ["CN"], at)).toBe(60);
    expect(stepsNeeded(judgement({ CN: channel("drifting") }), ["CN"], at)).toBe(60);
  });
});

describe("the end of a night", () => {
  const evening = new Date(2030, 5, 1, 22, 15).getTime();

  it("is the next such time of day, or a time from now", () => {
    expect(resolveDeadline({ clock: "06:30" }, evening)).toBe(new Date(2030, 5, 2, 6, 30).getTime());
    expect(resolveDeadline({ clock: "23:00" }, evening)).toBe(new Date(2030, 5, 1, 23, 0).getTime());
    expect(resolveDeadline({ clock: "22:15" }, evening)).toBe(new Date(2030, 5, 2, 22, 15).getTime());
    expect(resolveDeadline({ durationSeconds: 90 }, evening)).toBe(evening + 90_000);
    expect(resolveDeadline(null, evening)).toBeNull();
  });

  it("refuses what is no time of day", () => {
    for (const clock of ["24:00", "6.30", "noon", ""])
      expect(() => resolveDeadline({ clock }, evening)).toThrow("no time of day");
  });
});
