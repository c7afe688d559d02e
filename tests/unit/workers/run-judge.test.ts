import { describe, expect, it } from "vitest";
import type { ChannelInfo, HistorySamples } from "../../../orchestrator/contract/index.ts";
import { createRunJudge, type RunJudgeOptions } from "../../../workers/create-run-judge.ts";
import type { Finding } from "../../../workers/run-judge.ts";
import { steady } from "../../helpers/test-plan.ts";
import { solvers } from "../../helpers/test-simulations.ts";

const channel = (name: string, role: ChannelInfo["role"] = "load"): ChannelInfo => ({
  name,
  unit: "1",
  what: name,
  role,
});
const options = (more: Partial<RunJudgeOptions> = {}): RunJudgeOptions => ({
  channels: [channel("CN"), channel("strip01.CN"), channel("speed", "monitor")],
  periods: [],
  dtSeconds: 0.01,
  accept: { confidence: 0.95, channels: [{ name: "CN", tolerance: { absolute: 0.05 } }] },
  onset: { channels: "all", sensitivity: 1, bounds: {} },
  longestSteps: 2000,
  shortestSteps: 0,
  ...more,
});

function record(steps: number, value: (step: number) => number[]): HistorySamples {
  const rows = Array.from({ length: steps }, (_, i) => value(i + 1));
  return {
    fromStep: 1,
    times: Float64Array.from(rows, (_, i) => (i + 1) * 0.01),
    columns: rows[0]!.map((_, c) => Float64Array.from(rows, (row) => row[c]!)),
  };
}

/** Pushes a record sample by sample; the step at which a monitor spoke up. */
function push(judge: ReturnType<typeof createRunJudge>, samples: HistorySamples): number | null {
  for (let i = 0; i < samples.times.length; i++)
    if (judge.push(Float64Array.from(samples.columns, (column) => column[i]!))) return i + 1;
  return null;
}

const noise = (steps: number, seed = 7): number[] => {
  const simulation = solvers.get("test-process")!.create(steady(seed));
  const out = new Float64Array(3);
  return Array.from({ length: steps }, () => {
    simulation.step();
    simulation.sample(out);
    return out[0]!;
  });
};

describe("the judge of an attempt", () => {
  it("demands nothing that the run does not record, and something that it does", () => {
    const wider = options().accept.channels.concat({ name: "rotor1.CT", tolerance: { percent: 1 } });
    const judge = createRunJudge(options({ accept: { confidence: 0.95, channels: wider } }));
    const x = noise(1500);
    const finding = judge.look(record(1500, (n) => [x[n - 1]!, 0, 1]));
    expect(Object.keys(finding.judgement.channels)).toEqual(["CN"]);
    expect(finding.accepted).toBe(true);
    const other = [{ name: "CX", tolerance: { percent: 1 } }];
    expect(() => createRunJudge(options({ accept: { confidence: 0.95, channels: other } }))).toThrow(
      "records none of: CX",
    );
  });

  it("leaves single strips to themselves: neither watched nor averaged", () => {
    const judge = createRunJudge(options());
    const x = noise(1500);
    const samples = record(1500, (n) => [x[n - 1]!, n > 1000 ? 1e9 : 1, 1]);
    expect(push(judge, samples)).toBeNull();
    expect(Object.keys(judge.atTheEnd(samples).judgement.channels)).toEqual(["CN"]);
  });

  it("watches what it was told to, within the bounds it was told", () => {
    const watched = { channels: ["speed"], sensitivity: 1, bounds: { speed: { max: 5 } } };
    const judge = createRunJudge(options({ onset: watched }));
    const x = noise(600);
    const samples = record(600, (n) => [x[n - 1]!, 0, n === 500 ? 6 : 1 + 0.01 * x[n - 1]!]);
    expect(push(judge, samples)).toBe(500);
  });

  it("accepts nothing before the shortest run", () => {
    const x = noise(1500);
    const samples = record(1500, (n) => [x[n - 1]!, 0, 1]);
    const early = (shortestSteps: number): Finding =>
      createRunJudge(options({ shortestSteps })).look(samples);
    expect(early(1500).accepted).toBe(true);
    expect(early(1501).accepted).toBe(false);
    expect(early(1501).judgement.channels.CN!.words).toContain("1501");
  });

  it("says after an onset what precedes it is good for", () => {
    const x = noise(2000);
    const from = 1500;
    const growing = (n: number) => {
      const grown = n > from ? 0.05 * Math.exp(0.04 * (n - from)) * Math.cos(0.9 * n) : 0;
      return [x[n - 1]! + grown, 0, 1];
    };
    for (const [absolute, kept] of [
      [0.05, true],
      [0.002, false],
    ] as const) {
      const channels = [{ name: "CN", tolerance: { absolute } }];
      const judge = createRunJudge(options({ accept: { confidence: 0.95, channels } }));
      const whole = record(2000, growing);
      const step = push(judge, whole)!;
      expect(step).toBeGreaterThan(from);
      const { judgement, accepted } = judge.afterAlarm(record(step, growing));
      expect(judgement.onset!.channel).toBe("CN");
      expect(judgement.onset!.trustedEndIndex!).toBeLessThan(from + 40);
      expect(accepted).toBe(kept);
      const { verdict, window, samplesNeeded } = judgement.channels.CN!;
      expect(verdict).toBe(kept ? "accepted" : "unstable");
      if (kept) expect(window!.toIndex).toBeLessThanOrEqual(judgement.onset!.trustedEndIndex!);
      else expect(samplesNeeded).toBeNull();
    }
  });

  it("takes a value that the solver could not give for an onset at the next step", () => {
    const judge = createRunJudge(options());
    const x = noise(1500);
    const samples = record(1500, (n) => [x[n - 1]!, 0, 1]);
    expect(push(judge, samples)).toBeNull();
    const { judgement, accepted } = judge.afterNonFinite(samples, "the wake is NaN");
    expect(judgement).toMatchObject({
      samples: 1500,
      onset: { kind: "non-finite", index: 1500, words: "the wake is NaN" },
    });
    expect(accepted).toBe(true);
  });

  it("looks at the lengths of one ladder, whoever asks and from wherever", () => {
    const { nextLook } = createRunJudge(options());
    const ladder: number[] = [];
    for (let n = nextLook(0); n < 3000; n = nextLook(n)) ladder.push(n);
    expect(ladder[0]).toBe(200);
    for (let n = 1; n < 3000; n++)
      expect(nextLook(n)).toBe(ladder.find((look) => look > n) ?? nextLook(ladder.at(-1)!));
  });
});
