import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { campaignText, plainDescription, planOf } from "../../../helpers/planned.ts";

const SWEEP = `axes:
  - field: rotors.*.tip_speed_ratio
    values: [2.5, 3, 3.5]
  - field: rotors.*.above_m
    range: { from: 0, to: 0.3, count: 4 }
variants:
  - { name: rotors off, set: { rotors: [] } }
baseline: rotors off
`;

describe("expandCampaign", () => {
  it("makes every combination, in file order, the last axis fastest, with readable labels", () => {
    const { runs } = planOf(campaignText(`${SWEEP}sufficiency: off`));
    expect(runs).toHaveLength(13);
    expect(runs.slice(0, 5).map((run) => run.label)).toEqual([
      "tip-speed ratio 2.5 · above 0 m",
      "tip-speed ratio 2.5 · above 0.1 m",
      "tip-speed ratio 2.5 · above 0.2 m",
      "tip-speed ratio 2.5 · above 0.3 m",
      "tip-speed ratio 3 · above 0 m",
    ]);
    expect(runs.map((run) => run.number)).toEqual(runs.map((_, i) => i + 1));
    expect(runs[4]!.varied).toEqual({ "tip-speed ratio": 3, above: 0 });
    expect(runs[4]!.inputs).toMatchObject({
      rotors: [
        { tip_speed_ratio: 3, above_m: 0 },
        { tip_speed_ratio: 3, above_m: 0 },
      ],
    });
  });

  it("makes one baseline of all that come out equal, and ties every run to it", () => {
    const { runs, order } = planOf(campaignText(`${SWEEP}sufficiency: off`));
    const baselines = runs.filter((run) => run.role === "baseline");
    expect(baselines).toHaveLength(1);
    expect(baselines[0]).toMatchObject({ label: "rotors off", baselineRunId: null, varied: { above: null } });
    const swept = runs.filter((run) => run.role === "sweep");
    expect(swept.every((run) => run.baselineRunId === baselines[0]!.runId)).toBe(true);
    expect(order[0]).toBe(baselines[0]!.runId);
  });

  it("keeps a baseline for each value of an axis that still applies to it", () => {
    const { runs } = planOf(
      campaignText(
        `${SWEEP}sufficiency: off`.replace("rotors.*.above_m", "wing.pitch_deg").replace("to: 0.3", "to: 6"),
      ),
    );
    const baselines = runs.filter((run) => run.role === "baseline");
    expect(baselines.map((run) => run.label)).toEqual(
      [0, 2, 4, 6].map((deg) => `rotors off · pitch ${deg} deg`),
    );
    const tied = runs.filter((run) => run.baselineRunId === baselines[1]!.runId);
    expect(tied.map((run) => run.varied.pitch)).toEqual([2, 2, 2]);
  });

  it("adds wake-length companions at the four corners and the middle unless told otherwise", () => {
    const { runs } = planOf(campaignText(SWEEP));
    const companions = runs.filter((run) => run.role === "companion");
    expect(companions).toHaveLength(5);
    for (const companion of companions) {
      const tested = runs.find((run) => run.runId === companion.companionOf!.runId)!;
      expect(companion.companionOf!.aspect).toBe("wake-length");
      expect(tested.inputs).toMatchObject({ numerics: { rotor_wake_rows: 75, wing_wake_spans: 1 } });
      expect(companion.inputs).toMatchObject({ numerics: { rotor_wake_rows: 113, wing_wake_spans: 1.5 } });
      expect(companion.inputs).toMatchObject({ wing: tested.inputs.wing, rotors: tested.inputs.rotors });
    }
    const places = companions.map((run) => `${run.varied["tip-speed ratio"]} ${run.varied.above}`);
    expect(places.toSorted()).toEqual(["2.5 0", "2.5 0.3", "3 0.1", "3.5 0", "3.5 0.3"]);
    expect(planOf(campaignText(`${SWEEP}sufficiency: { at: middle }`)).runs.at(-1)!.varied.above).toBe(0.1);
  });

  it("gives a finer step as many more steps and rows, so that time and wake stay as long", () => {
    const accept = "{ channels: { CN: 0.01 }, longest_steps: 720, shortest_steps: 100 }";
    const { runs } = planOf(campaignText("sufficiency: { wake_length: off, step: on }", accept));
    expect(runs[1]).toMatchObject({
      longestSteps: 1440,
      shortestSteps: 200,
      companionOf: { aspect: "step" },
    });
    expect(runs[1]!.inputs).toMatchObject({ numerics: { step_deg: 10, rotor_wake_rows: 150 } });
    expect(runs[1]!.longestSteps * runs[1]!.dtSeconds).toBeCloseTo(
      runs[0]!.longestSteps * runs[0]!.dtSeconds,
      12,
    );
  });

  it("has as many runs as the product of the axes less what is left out", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 6 }),
        fc.integer({ min: 2, max: 6 }),
        fc.integer({ min: 1, max: 4 }),
        fc.integer({ min: 0, max: 5 }),
        (a, b, c, cut) => {
          const list = (n: number) => `[${Array.from({ length: n }, (_, i) => i + 1).join(", ")}]`;
          const { runs, order } = planOf(
            campaignText(`axes:
  - { field: wing.pitch_deg, values: ${list(a)} }
  - { field: rotors.*.above_m, name: above, range: { from: 1, to: ${b}, count: ${b} } }
  - { field: rotors.1.blades, values: ${list(c)} }
leave_out:
  - when: { above: { from: 2, to: ${1 + cut} }, wing.pitch_deg: 1 }
sufficiency: off`),
          );
          const leftOut = c * Math.max(0, Math.min(b, 1 + cut) - 1);
          expect(runs).toHaveLength(a * b * c - leftOut);
          expect(new Set(runs.map((run) => run.runId)).size).toBe(runs.length);
          expect([...order].sort()).toEqual(runs.map((run) => run.runId).sort());
        },
      ),
      { numRuns: 60, seed: 90_210_001 },
    );
  });

  it("gives the same ids whatever the order of keys, the spelling of numbers, and defaults stated or not", () => {
    const one = planOf(campaignText("sufficiency: off"));
    const other = planOf(`
sufficiency: off
accept: { longest_revolutions: 4e1, channels: { CN: 1 % } }
campaign: Another name
case:
  numerics: { rotor_wake_rows: 75, cores: { growth: true } }
  rotors:
    - { tip_speed_ratio: 3.50, hub_radius_m: 4e-2, radius_m: 0.240, blades: 2 }
    - { hub_radius_m: 0.04, radius_m: 24.0e-2, tip_speed_ratio: 35e-1 }
  wing: { pitch_deg: 5.0, tip_chord_m: .24, root_chord_m: 0.36, span_m: 2.4 }
  path: { speed_mps: 20.0, kind: straight }
`);
    expect(one.runs[0]!.runId).toMatch(/^[0-9a-f]{12}$/);
    expect(other.runs.map((run) => run.runId)).toEqual(one.runs.map((run) => run.runId));
    const later = planOf(campaignText("sufficiency: off"), { modelVersion: "test2" });
    expect(later.runs[0]!.runId).not.toBe(one.runs[0]!.runId);
  });

  it("pairs axes, and fills the space with the same samples every time", () => {
    const axes = `axes:
  - { field: wing.pitch_deg, values: [1, 2, 2] }
  - { field: rotors.*.above_m, values: [0, 0, 0.1] }
sufficiency: off`;
    const paired = planOf(campaignText(`combine: paired\n${axes}`));
    expect(paired.runs.map((run) => run.varied)).toEqual([
      { pitch: 1, above: 0 },
      { pitch: 2, above: 0 },
      { pitch: 2, above: 0.1 },
    ]);
    const filling = campaignText(`combine: { space_filling: 16 }
axes:
  - { field: wing.pitch_deg, range: { from: 0, to: 8 } }
  - { field: rotors.*.tip_speed_ratio, log_range: { from: 2, to: 8 } }
  - { field: rotors.*.blades, values: [2, 3] }
sufficiency: off`);
    const { runs, axes: table } = planOf(filling);
    expect(runs.map((run) => run.runId)).toEqual(planOf(filling).runs.map((run) => run.runId));
    const eighths = (values: number[]) => new Set(values.map((v) => Math.floor(v * 16))).size;
    expect(eighths(runs.map((run) => Number(run.varied.pitch) / 8))).toBe(16);
    expect(eighths(runs.map((run) => Math.log2(Number(run.varied["tip-speed ratio"]) / 2) / 2))).toBe(16);
    expect(runs.filter((run) => run.varied.blades === 2)).toHaveLength(8);
    expect(table[2]).toEqual({ name: "blades", values: [2, 3] });
  });

  it("moves tied fields together, and whole settings", () => {
    const { runs } = planOf(
      campaignText(`axes:
  - { fields: [wing.root_chord_m, wing.tip_chord_m], name: chord, unit: m, values: [0.2, 0.3] }
  - name: rotors
    settings:
      - { name: inner, set: { rotors.1.along_span_m: 0.4, rotors.2.along_span_m: -0.4 } }
      - { name: three bladed, set: { rotors.*.blades: 3 } }
sufficiency: off`),
    );
    expect(runs.map((run) => run.label)).toEqual([
      "chord 0.2 m · inner",
      "chord 0.2 m · three bladed",
      "chord 0.3 m · inner",
      "chord 0.3 m · three bladed",
    ]);
    expect(runs[0]!.inputs).toMatchObject({
      wing: { root_chord_m: 0.2, tip_chord_m: 0.2 },
      rotors: [{ along_span_m: 0.4 }, { along_span_m: -0.4 }],
    });
  });

  it("runs variants beside the baseline at every point, equal cases once", () => {
    const { runs, axes, warnings } = planOf(
      campaignText(`axes:
  - { field: rotors.*.blades, values: [2, 3] }
variants:
  - { name: two bladed, set: { rotors.*.blades: 2 } }
  - { name: raised, set: { rotors.*.above_m: 0.2 } }
sufficiency: off`),
    );
    expect(runs.map((run) => run.label)).toEqual([
      "blades 2",
      "blades 2 · raised",
      "blades 3",
      "blades 3 · raised",
    ]);
    expect(warnings).toEqual([
      "blades 2 · two bladed is the same case as blades 2: one run serves both",
      "blades 3 · two bladed is the same case as blades 2: one run serves both",
    ]);
    expect(axes[1]).toEqual({ name: "variant", values: ["as given", "raised"] });
  });

  it("takes lengths in revolutions, steps or seconds, and a longest run of its own for a single case", () => {
    const plan = planOf(
      campaignText(
        `single_cases:
  - { name: short, set: { wing.pitch_deg: 1 }, longest_steps: 50 }
sufficiency: off`,
        "{ channels: { CN: 0.01 }, longest_s: 1, shortest_revolutions: 5 }",
      ),
    );
    expect(plan.runs.map((run) => [run.role, run.longestSteps, run.shortestSteps])).toEqual([
      ["sweep", 180, 90],
      ["single", 50, 90],
    ]);
    expect(plan.runs[1]!.warnings).toEqual([
      {
        code: "shorter-than-asked",
        field: "accept",
        words:
          "nothing can be accepted: the longest run has 50 steps, and the shortest run asked for takes 90",
      },
    ]);
  });

  it("waits for the return of the wake, unless the first loop is wanted", () => {
    const describe = (inputs: Parameters<typeof plainDescription>[0]) => ({
      ...plainDescription(inputs),
      wakeReturnSteps: 200,
    });
    const text = (more: string) =>
      campaignText("sufficiency: off", `{ channels: { CN: 0.01 }, longest_steps: 700${more} }`);
    expect(planOf(text(""), { describe }).runs[0]).toMatchObject({
      shortestSteps: 200,
      wakeReturnSteps: 200,
    });
    const first = planOf(text(", first_loop_wanted: true"), { describe }).runs[0];
    expect(first).toMatchObject({ shortestSteps: 6, wakeReturnSteps: 200 });
  });

  it("states rules, deadline and cost", () => {
    const plan = planOf(
      campaignText(
        `deadline: "06:30"
workers: 4
notes: A note.
onset: { channels: [CN], sensitivity: 0.8, bounds: { CN: { max: 3 } } }
remedies:
  - { name: shorter wake, set: { numerics.rotor_wake_rows: 40 }, cost: less far wake }
sufficiency: { tolerance: 2 % }`,
        "{ channels: { CN: 0.5 % of mean, rotor1.CT: 0.002 }, confidence: 0.9, longest_revolutions: 40 }",
      ),
    );
    expect(plan).toMatchObject({
      campaign: "small",
      title: "Small",
      solver: "built-in",
      modelVersion: "test",
      accept: {
        channels: [
          { name: "CN", tolerance: { percent: 0.5 } },
          { name: "rotor1.CT", tolerance: { absolute: 0.002 } },
        ],
        confidence: 0.9,
      },
      onset: { channels: ["CN"], sensitivity: 0.8, bounds: { CN: { max: 3 } } },
      remedies: [{ name: "shorter wake", set: { "numerics.rotor_wake_rows": 40 }, cost: "less far wake" }],
      sufficiencyTolerance: { percent: 2 },
      deadline: { clock: "06:30" },
      workers: 4,
    });
    // 720 steps of 3e4 pairs at 1e6 pairs a second, twice (run and companion), on four workers.
    expect(plan.predicted.coreSeconds).toBeCloseTo(2 * 21.6, 10);
    expect(plan.predicted.wallSeconds).toBeCloseTo(21.6, 10);
  });
});
