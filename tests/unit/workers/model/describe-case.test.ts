import { describe, expect, it } from "vitest";
import { describeCase, loadDoubts } from "../../../../workers/model/index.ts";
import { type PairKernel, typescriptKernel } from "../../../../workers/model/kernel/index.ts";
import { type CaseInput, caseOf, runCase } from "../../../helpers/run-case.ts";

const rotor = { radius_m: 0.24, hub_radius_m: 0.05, ahead_m: 0.3, along_span_m: 0.6, sections: 4 } as const;
const base: CaseInput = {
  wind: { speed_mps: 8 },
  path: { kind: "circle", radius_m: 4.5, speed_mps: 20 },
  wing: { span_m: 2.4, root_chord_m: 0.36, tip_chord_m: 0.24, pitch_deg: -16 },
  rotors: [{ ...rotor, tip_speed_ratio: 3.5 }],
  numerics: { wing_row_every: 3 },
};
const outlook = (change: Partial<CaseInput> = {}) => describeCase(caseOf({ ...base, ...change }));
const codes = (change: Partial<CaseInput>) => outlook(change).warnings.map(({ code }) => code);

const sumOver = (steps: number, of: (step: number) => number): number =>
  Array.from({ length: steps }, (_, i) => of(i + 1)).reduce((sum, x) => sum + x, 0);

describe("time", () => {
  it("is the first rotor's: 20 degrees at tip-speed ratio 3.5 in √(20² + 8²) m/s", () => {
    const turn = (3.5 * Math.sqrt(464)) / 0.24;
    expect(outlook().dtSeconds).toBeCloseTo(Math.PI / 9 / turn, 15);
    expect(outlook().stepsPerRevolution).toBe(18);
  });

  it("is the clock's where one is named, with rotors and without", () => {
    const numerics = { clock_revolutions_per_s: 50 };
    expect(outlook({ numerics }).dtSeconds).toBeCloseTo(1 / 900, 15);
    expect(outlook({ numerics, rotors: [] }).dtSeconds).toBeCloseTo(1 / 900, 15);
  });

  it("is that of a way in chords where nothing turns, and 18 steps count as a revolution", () => {
    const found = outlook({ rotors: [] });
    expect(found.dtSeconds).toBeCloseTo((0.5 * 0.3) / Math.sqrt(464), 15);
    expect(found.stepsPerRevolution).toBe(18);
  });
});

describe("periods", () => {
  it("are those of blades, cuts and a loop that is not even all round", () => {
    expect(outlook().periods.map(({ steps }) => Math.round(steps * 1e6) / 1e6)).toEqual([9, 7, 21]);
    const tilted = outlook({ path: { kind: "circle", radius_m: 4.5, speed_mps: 20, tilt_deg: 20 } });
    expect(tilted.periods.at(-1)).toEqual({ name: "loop", steps: tilted.loopSteps });
  });
});

describe("cost", () => {
  const input: CaseInput = {
    ...base,
    numerics: { wing_row_every: 3, rotor_wake_rows: 12, wing_wake_spans: 0.25, truncate_every: 5 },
  };

  it("knows the nodes of every step, and the most that there ever are", () => {
    const { "wake.nodes": nodes } = runCase(input, 90);
    const { nodesAt, nodesAtFullWake } = describeCase(caseOf(input));
    expect(Array.from(nodes!, (_, i) => nodesAt(i + 1))).toEqual(Array.from(nodes!));
    expect(Math.max(...nodes!)).toBe(nodesAtFullWake);
  });

  it("counts the pairs that a kernel is asked for, and those of the wing's own lattice", () => {
    let asked = 0;
    const counting: PairKernel = {
      ...typescriptKernel,
      induce(lattices, points, out) {
        for (const { rows, cols } of lattices) asked += (rows * (cols - 1) + (rows - 1) * cols) * points.n;
        typescriptKernel.induce(lattices, points, out);
      },
    };
    runCase(input, 40, counting);
    // 5 by 25 nodes on 96 + 96 + 100 points, by hand; always by the kernel in double precision.
    const ownLattice = (5 * 24 + 4 * 25) * 292;
    const { pairsPerStepAt } = describeCase(caseOf(input));
    expect(sumOver(40, pairsPerStepAt) - 40 * ownLattice).toBe(asked);
  });

  it("adds up steps, beyond the full wake by cycles of cuts", () => {
    const { pairsPerStepAt, pairsOver } = describeCase(caseOf(input));
    expect(pairsOver(20)).toBe(sumOver(20, pairsPerStepAt));
    for (const cycles of [3, 10]) {
      const steps = 15 * cycles - 1;
      expect(pairsOver(steps) / sumOver(steps, pairsPerStepAt)).toBeCloseTo(1, 12);
    }
  });
});

describe("return of the wake", () => {
  const slow: Partial<CaseInput> = {
    wind: { speed_mps: 0.5 },
    path: { kind: "circle", radius_m: 2, speed_mps: 20 },
  };

  it("is one loop after the start where the wake is kept so long and the wind leaves it there", () => {
    const kept = outlook({ ...slow, numerics: { wing_wake_spans: 6.5 } });
    expect(kept.wakeReturnSteps).toBe(Math.ceil(kept.loopSteps!));
  });

  it("is none where it is cut before, carried off, or the flight straight", () => {
    expect(outlook({ ...slow, numerics: { wing_wake_spans: 1 } }).wakeReturnSteps).toBeNull();
    expect(outlook({ numerics: { wing_wake_spans: 15 } }).wakeReturnSteps).toBeNull();
    expect(outlook({ path: { kind: "straight", speed_mps: 20 } }).loopSteps).toBeNull();
  });
});

describe("doubts", () => {
  it("has none about a healthy case", () => {
    expect(codes({})).toEqual([]);
  });

  it("names each by its field", () => {
    expect(codes({ wing: { ...base.wing, spanwise_panels: 14 } })).toEqual(["few-strips-under-rotor"]);
    expect(codes({ numerics: { wing_row_every: 3, step_deg: 40 } })).toEqual(["coarse-step"]);
    expect(codes({ numerics: { wing_row_every: 3, cores: { rotor_core_radii: 0.2 } } })).toEqual([
      "thick-core",
    ]);
    expect(codes({ numerics: { wing_row_every: 3, truncate_every: 3 } })).toEqual([
      "cut-in-step-with-blades",
    ]);
    expect(codes({ numerics: { wing_row_every: 3, truncate_every: 1 } })).toEqual([]);
  });

  it("doubts a thrust coefficient above 0.7 afterwards, and nothing else", () => {
    const found = loadDoubts({ "rotor1.CT": 0.71, "rotor2.CT": 0.69, CN: 3, "rotor1.CP": 0.9 });
    expect(found.map(({ field }) => field)).toEqual(["rotor1.CT"]);
  });
});

describe("refusals", () => {
  const refused = (change: Partial<CaseInput>) => () => outlook(change);

  it("say what contradicts what", () => {
    expect(refused({ rotors: [{ ...rotor, tip_speed_ratio: 3, revolutions_per_s: 40 }] })).toThrow(
      /has both/,
    );
    expect(refused({ wing: { ...base.wing, spanwise_panels: 6 } })).toThrow(/too few to feel its wake/);
    expect(refused({ wing: { ...base.wing, spanwise_panels: 200, chordwise_panels: 12 } })).toThrow(
      /2400 panels/,
    );
    expect(refused({ numerics: { clock_revolutions_per_s: 10 } })).toThrow(/more than the 45/);
    expect(refused({ wind: { speed_mps: 8, shear_exponent: 0.1, centre_height_m: 4 } })).toThrow(
      /into the ground/,
    );
    expect(refused({ path: { kind: "circle", radius_m: 4.5, speed_mps: 20, tether_length_m: 4 } })).toThrow(
      /does not reach/,
    );
  });
});
