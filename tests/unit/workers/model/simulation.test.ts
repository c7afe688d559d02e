import { describe, expect, it } from "vitest";
import { createSimulation, restoreSimulation } from "../../../../workers/model/index.ts";
import { type PairKernel, typescriptKernel } from "../../../../workers/model/kernel/index.ts";
import { wingGeometry } from "../../../../workers/model/wing/wing-geometry.ts";
import { type CaseInput, caseOf, runCase } from "../../../helpers/run-case.ts";

const rotor = {
  radius_m: 0.24,
  hub_radius_m: 0.05,
  ahead_m: 0.3,
  tip_speed_ratio: 3.5,
  sections: 3,
} as const;
const small: CaseInput = {
  wind: { speed_mps: 8 },
  path: { kind: "circle", radius_m: 4.5, speed_mps: 20 },
  wing: {
    span_m: 2.4,
    root_chord_m: 0.36,
    tip_chord_m: 0.24,
    pitch_deg: -16,
    chordwise_panels: 2,
    spanwise_panels: 14,
  },
  rotors: [
    { ...rotor, along_span_m: 0.6 },
    { ...rotor, along_span_m: -0.6, rotation: "left-handed" },
  ],
  numerics: { wing_row_every: 3, rotor_wake_rows: 10, wing_wake_spans: 0.25 },
};

const samplesOf = (simulation: ReturnType<typeof createSimulation>, steps: number): Float64Array[] =>
  Array.from({ length: steps }, () => {
    simulation.step();
    const sample = new Float64Array(simulation.channels.length);
    simulation.sample(sample);
    return sample;
  });

describe("checkpoints", () => {
  it("go on bit-identically from any step, the ones between sheddings included", () => {
    for (const at of [0, 1, 2, 3, 17, 29]) {
      const whole = createSimulation(caseOf(small), typescriptKernel);
      samplesOf(whole, at);
      const continued = restoreSimulation(caseOf(small), typescriptKernel, whole.checkpoint());
      expect(continued.stepIndex).toBe(at);
      expect(samplesOf(continued, 8)).toEqual(samplesOf(whole, 8));
      expect(continued.checkpoint()).toEqual(whole.checkpoint());
    }
  });

  it("hold the last sample", () => {
    const whole = createSimulation(caseOf(small), typescriptKernel);
    const last = samplesOf(whole, 5).at(-1)!;
    const again = new Float64Array(last.length);
    restoreSimulation(caseOf(small), typescriptKernel, whole.checkpoint()).sample(again);
    expect(again).toEqual(last);
  });

  it("are refused when damaged anywhere, cut short, of another case or of another kernel", () => {
    const whole = createSimulation(caseOf(small), typescriptKernel);
    samplesOf(whole, 4);
    const bytes = whole.checkpoint();
    const restore =
      (given: Uint8Array, input = small, kernel: PairKernel = typescriptKernel) =>
      () =>
        restoreSimulation(caseOf(input), kernel, given);
    for (const at of [0, 9, 13, 40, bytes.length - 2]) {
      const broken = bytes.slice();
      broken[at] = broken[at]! ^ 1;
      expect(restore(broken)).toThrow(expect.objectContaining({ code: "CHECKPOINT_DAMAGED" }));
    }
    expect(restore(bytes.slice(0, 200))).toThrow(expect.objectContaining({ code: "CHECKPOINT_DAMAGED" }));
    expect(restore(new Uint8Array(0))).toThrow(expect.objectContaining({ code: "CHECKPOINT_DAMAGED" }));
    expect(restore(bytes, { ...small, wind: { speed_mps: 9 } })).toThrow(/belongs to another case/);
    expect(restore(bytes, small, { ...typescriptKernel, name: "another" })).toThrow(/or kernel/);
  });
});

describe("a simulation", () => {
  it("gives the same bits twice", () => {
    const run = () => samplesOf(createSimulation(caseOf(small), typescriptKernel), 20);
    expect(run()).toEqual(run());
  });

  it("names quantity and step of what is not a number, and records nothing of it", () => {
    const broken: PairKernel = {
      name: "broken",
      induce: (_, points, out) => {
        if (points.n > 400) out.u[3] = Number.NaN;
      },
    };
    const simulation = createSimulation(caseOf(small), broken);
    expect(() => samplesOf(simulation, 60)).toThrow(/wake node 4 is not a number at step \d+/);
    const sample = new Float64Array(simulation.channels.length);
    simulation.sample(sample);
    expect(sample.every(Number.isFinite)).toBe(true);
  });
});

describe("symmetries of the physics", () => {
  const flight: CaseInput = {
    path: { kind: "straight", speed_mps: 20 },
    wing: { ...small.wing, pitch_deg: 5 },
    numerics: small.numerics!,
  };

  it("a symmetric wing with mirrored rotors does not roll, and both rotors carry the same", () => {
    const input: CaseInput = {
      ...flight,
      rotors: [
        { ...rotor, along_span_m: 0.6, phase_deg: 30 },
        { ...rotor, along_span_m: -0.6, rotation: "left-handed", phase_deg: 150 },
      ],
    };
    const found = runCase(input, 30);
    for (let i = 0; i < 30; i++) {
      expect(Math.abs(found.CRoll![i]!)).toBeLessThan(1e-9);
      expect(Math.abs(found["rotor1.CT"]![i]! / found["rotor2.CT"]![i]! - 1)).toBeLessThan(1e-6);
    }
  });

  it("wind and flight add up: the same air speed gives the same loads on the wing", () => {
    const still = runCase(flight, 20);
    const windy = runCase(
      { ...flight, wind: { speed_mps: 5 }, path: { kind: "straight", speed_mps: 15 } },
      20,
    );
    for (let i = 0; i < 20; i++) expect(windy.CN![i]! / still.CN![i]!).toBeCloseTo(1, 9);
  });

  it("coefficients do not depend on the density of the air, nor on the scale where viscosity is scaled along", () => {
    const dense = runCase({ ...flight, air: { density_kgpm3: 1000 } }, 10);
    const light = runCase(flight, 10);
    for (let i = 0; i < 10; i++) expect(dense.CN![i]! / light.CN![i]!).toBeCloseTo(1, 12);
    const double: CaseInput = {
      ...flight,
      air: { viscosity_m2ps: 2 * 1.46e-5 },
      wing: { ...flight.wing, span_m: 4.8, root_chord_m: 0.72, tip_chord_m: 0.48 },
    };
    const large = runCase(double, 10);
    for (let i = 0; i < 10; i++) expect(large.CN![i]! / light.CN![i]!).toBeCloseTo(1, 9);
  });

  it("a gust lifts the normal force and lets it come back", () => {
    const calm: CaseInput = { ...small, rotors: [] };
    const windy = { speed_mps: 8, gust: { peak_mps: 4, start_s: 0.2, duration_s: 0.15 } };
    const found = runCase({ ...calm, wind: windy }, 150).CN!;
    const without = runCase(calm, 150).CN!;
    const ratio = Array.from(found, (x, i) => x / without[i]!);
    expect(ratio.slice(0, 28).every((x) => x === 1)).toBe(true);
    expect(Math.max(...ratio)).toBeGreaterThan(1.2);
    expect(ratio.at(-1)).toBeCloseTo(1, 2);
  });

  it("strips, weighted by their areas, add up to the wing", () => {
    const found = runCase({ ...small, rotors: [] }, 12);
    const { edges, planform, stripAreas } = wingGeometry(caseOf(small).wing, { clusters: [], wayPerStep: 1 });
    const sum = stripAreas.reduce(
      (total, area, j) => total + area * found[`strip${String(j + 1).padStart(2, "0")}.CN`]![11]!,
      0,
    );
    expect(sum / planform.areaM2 / found.CN![11]!).toBeCloseTo(1, 9);
    expect(edges).toHaveLength(15);
  });

  it("the tether carries the rotors' thrust besides", () => {
    const alone = runCase({ ...small, rotors: [] }, 12);
    const driven = runCase(small, 12);
    const beyondWing = (run: typeof alone) => run.CTether![11]! - run.CN![11]!;
    expect(beyondWing(driven)).toBeGreaterThan(beyondWing(alone) + 0.01);
  });

  it("a short tether takes a part of the pull outwards", () => {
    const tethered = (tether_length_m: number | null) =>
      runCase(
        { ...small, rotors: [], path: { kind: "circle", radius_m: 4.5, speed_mps: 20, tether_length_m } },
        12,
      ).CTether![11]!;
    expect(tethered(1e5) / tethered(null)).toBeCloseTo(1, 4);
    expect(tethered(9) / tethered(null)).toBeCloseTo(Math.sqrt(1 - 0.25), 1);
  });
});
