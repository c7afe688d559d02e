import { describe, expect, it } from "vitest";
import { describeCase } from "../../workers/model/index.ts";
import { takeSample } from "../../workers/model/record/take-sample.ts";
import { createWakeMonitors } from "../../workers/model/record/wake-monitors.ts";
import { march } from "../../workers/model/state/march.ts";
import { createState } from "../../workers/model/state/model-state.ts";
import { type CaseInput, caseOf, exactKernel, runCase, speckWing, tailMean } from "../helpers/run-case.ts";
import { bladeElementMomentum } from "./model/blade-element-momentum.ts";

const BLADES = 3;
const HUB = 0.15;
const ZERO_LIFT = (-2 * Math.PI) / 180;
const SLOPE = 5.7;

interface Layout {
  readonly tipSpeedRatio: number;
  readonly induction: number;
  readonly sense: 1 | -1;
}

/** Blade of even induction without losses, tip radius 1 m, sections at cl = 0.6. */
function stations({ tipSpeedRatio, induction: a, sense: s }: Layout) {
  const cl = 0.6;
  return Array.from({ length: 12 }, (_, i) => {
    const r = HUB + ((1 - HUB) * i) / 11;
    const axial = 1 - s * a;
    const flow = Math.atan(axial / (tipSpeedRatio * r));
    const square = (axial / Math.sin(flow)) ** 2;
    return {
      radius_fraction: r,
      chord_m: (8 * Math.PI * r * a * axial) / (BLADES * cl * square * Math.cos(flow)),
      pitch_deg: ((flow - s * (cl / SLOPE + ZERO_LIFT)) * 180) / Math.PI,
    };
  });
}

/** The rotor on its own in straight flight; six sections a blade, 20 degrees a step, 75 rows. */
function alone(layout: Layout, tipSpeedRatio: number, polar: { cd0: number; cd_k: number }): CaseInput {
  return {
    path: { kind: "straight", speed_mps: 10 },
    wing: speckWing,
    rotors: [
      {
        radius_m: 1,
        hub_radius_m: HUB,
        blades: BLADES,
        stations: stations(layout),
        operation: layout.sense === 1 ? "generating" : "propelling",
        tip_speed_ratio: tipSpeedRatio,
        sections: 6,
        polar,
      },
    ],
    numerics: { wing_wake_spans: 1, rotor_wake_rows: 75, cores: { rotor_core_radii: 0.05 } },
  };
}

/** Coefficients over the ninth revolution. */
function settled(input: CaseInput): { cT: number; cP: number; cQ: number } {
  const histories = runCase(input, 162);
  const mean = (channel: string) => tailMean(histories, `rotor1.${channel}`, 18);
  return { cT: mean("CT"), cP: mean("CP"), cQ: mean("CQ") };
}

/** Coefficients of the same blades by the reference. */
function byMomentum(layout: Layout, tipSpeedRatio: number): { cT: number; cP: number } {
  const table = stations(layout);
  const n = 200;
  const at = (r: number, key: "chord_m" | "pitch_deg") => {
    const i = Math.min(table.length - 2, Math.floor(((r - HUB) / (1 - HUB)) * (table.length - 1)));
    const t = (r - table[i]!.radius_fraction) / (table[i + 1]!.radius_fraction - table[i]!.radius_fraction);
    return table[i]![key] + t * (table[i + 1]![key] - table[i]![key]);
  };
  const sections = Array.from({ length: n }, (_, i) => {
    const r = HUB + ((i + 0.5) / n) * (1 - HUB);
    return { r, dr: (1 - HUB) / n, chord: at(r, "chord_m"), pitch: (at(r, "pitch_deg") * Math.PI) / 180 };
  });
  const cl = (alpha: number) => Math.min(1.3, Math.max(-0.9, SLOPE * (alpha - ZERO_LIFT)));
  const cd = (alpha: number) => 0.012 + 0.01 * cl(alpha) ** 2;
  const rotor = { radius: 1, hub: HUB, blades: BLADES, sections, cl, cd, sense: layout.sense };
  return bladeElementMomentum(rotor, tipSpeedRatio);
}

const turbine: Layout = { tipSpeedRatio: 5, induction: 0.2, sense: 1 };
const propeller: Layout = { tipSpeedRatio: 4, induction: 0.1, sense: -1 };
const usual = { cd0: 0.012, cd_k: 0.01 };
const frictionless = { cd0: 0, cd_k: 0 };

describe("a rotor agrees with blade-element momentum theory with Prandtl's loss (Glauert 1935)", () => {
  for (const [layout, ratios, name] of [
    [turbine, [4, 6], "turbine, CT about 0.55 (measured +2.1 to +3.5 %, CP +3.2 to +5.3 %)"],
    [propeller, [3.4, 4.6], "propeller, CT 0.15 to 0.6 (measured -3.9 to -3.5 %, CP -3.1 to -2.6 %)"],
  ] as const) {
    it(`CT within 5 %, CP within 8 %: ${name}`, () => {
      for (const ratio of ratios) {
        const found = settled(alone(layout, ratio, usual));
        const reference = byMomentum(layout, ratio);
        expect(Math.abs(found.cT / reference.cT - 1)).toBeLessThan(0.05);
        expect(Math.abs(found.cP / reference.cP - 1)).toBeLessThan(0.08);
      }
    });
  }
});

describe("a rotor stays within what momentum theory allows", () => {
  it("turbine: power below Betz's 16/27 and below CT (1 + √(1 - CT))/2, even without friction (Betz 1920; Froude)", () => {
    for (const induction of [0.2, 1 / 3]) {
      const { cT, cP } = settled(alone({ ...turbine, induction }, 5, frictionless));
      expect(cP).toBeLessThan(16 / 27);
      expect(cP).toBeLessThan((cT * (1 + Math.sqrt(1 - cT))) / 2);
      expect(cP).toBeGreaterThan((0.9 * cT * (1 + Math.sqrt(1 - cT))) / 2);
    }
  });

  it("propeller: efficiency below Froude's 2/(1 + √(1 + CT)), and at least 0.93 of it without friction (measured 0.94)", () => {
    const { cT, cP } = settled(alone(propeller, 4, frictionless));
    const ideal = 2 / (1 + Math.sqrt(1 + cT));
    expect(cT / cP / ideal).toBeLessThan(1);
    expect(cT / cP / ideal).toBeGreaterThan(0.93);
  });

  it("breaks Betz's limit when its wake is frozen at the flight speed, as it must (measured CP 0.66)", () => {
    const inputs = caseOf(alone({ ...turbine, induction: 1 / 3 }, 5, frictionless));
    const state = createState(inputs);
    const { channels } = describeCase(inputs);
    const sample = new Float64Array(channels.length);
    const room = createWakeMonitors();
    const power = channels.findIndex(({ name }) => name === "rotor1.CP");
    let mean = 0;
    for (let step = 1; step <= 144; step++) {
      march(state, exactKernel);
      for (const { velocity, before } of state.wakes) {
        for (const field of [velocity.u, velocity.v, velocity.w, before.u, before.v, before.w]) field.fill(0);
      }
      takeSample(state, room, sample);
      if (step > 126) mean += sample[power]! / 18;
    }
    expect(mean).toBeGreaterThan(16 / 27);
  });
});

it("has power = torque times speed, and advance ratio π over tip-speed ratio (identities)", () => {
  const input = alone(turbine, 4, usual);
  const { cP, cQ } = settled(input);
  expect(cP / cQ).toBeCloseTo(4, 9);
  const { dtSeconds, stepsPerRevolution } = describeCase(caseOf(input));
  const revolutionsPerSecond = 1 / (dtSeconds * stepsPerRevolution);
  const advance = 10 / (revolutionsPerSecond * 2);
  expect(advance).toBeCloseTo(Math.PI / 4, 9);
});
