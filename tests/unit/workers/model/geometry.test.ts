import { describe, expect, it } from "vitest";
import { bladeLayout } from "../../../../workers/model/rotor/blade-layout.ts";
import { sectionPolar } from "../../../../workers/model/rotor/section-polar.ts";
import { windSpeed } from "../../../../workers/model/wind.ts";
import { camberLine } from "../../../../workers/model/wing/camber-line.ts";
import { planform } from "../../../../workers/model/wing/planform.ts";
import { stripEdges } from "../../../../workers/model/wing/strip-edges.ts";
import { caseOf, speckWing } from "../../../helpers/run-case.ts";

const straight = { kind: "straight", speed_mps: 10 } as const;
const windOf = (wind: Parameters<typeof caseOf>[0]["wind"]) =>
  caseOf({ path: straight, wing: speckWing, wind }).wind;
const rotorOf = (rotor: object) =>
  caseOf({ path: straight, wing: speckWing, rotors: [{ radius_m: 1, hub_radius_m: 0.2, ...rotor }] })
    .rotors[0]!;

describe("wind", () => {
  it("follows the power law: 8 m/s at 10 m is 8 · 2^0.2 = 9.190 m/s at 20 m", () => {
    const wind = windOf({ speed_mps: 8, shear_exponent: 0.2, reference_height_m: 10, centre_height_m: 15 });
    expect(windSpeed(wind, 5, 0)).toBeCloseTo(9.18958684, 8);
    expect(windSpeed(wind, -5, 0)).toBeCloseTo(8, 12);
  });

  it("stays finite below the ground", () => {
    const wind = windOf({ speed_mps: 8, shear_exponent: 0.2, centre_height_m: 15 });
    expect(windSpeed(wind, -1000, 0)).toBeGreaterThan(0);
  });

  it("has a gust that starts and ends at nothing and peaks half-way", () => {
    const wind = windOf({ speed_mps: 8, gust: { peak_mps: 3, start_s: 1, duration_s: 2 } });
    expect([0.5, 1, 1.5, 2, 3, 4].map((t) => windSpeed(wind, 0, t))).toEqual([8, 8, 9.5, 11, 8, 8]);
  });
});

describe("strips", () => {
  it("span the wing, rise, and lie symmetrically where their clusters do", () => {
    const edges = stripEdges(2.4, 25, [
      { atM: 0.6, radiusM: 0.24 },
      { atM: -0.6, radiusM: 0.24 },
    ]);
    expect(edges[0]).toBe(-1.2);
    expect(edges[25]).toBe(1.2);
    edges.forEach((edge, j) => {
      if (j > 0) expect(edge).toBeGreaterThan(edges[j - 1]!);
      expect(edge + edges[25 - j]!).toBeCloseTo(0, 9);
    });
  });

  it("are narrower under a cluster and at the tips than elsewhere", () => {
    const edges = stripEdges(10, 40, [{ atM: 2, radiusM: 0.5 }]);
    const widthAt = (y: number) => {
      const j = edges.findIndex((edge) => edge > y);
      return edges[j]! - edges[j - 1]!;
    };
    expect(widthAt(2)).toBeLessThan(0.7 * widthAt(-2));
    expect(widthAt(4.95)).toBeLessThan(0.7 * widthAt(0));
  });
});

describe("camber line", () => {
  it("is that of two parabolas: 2 % at 40 % has 2 % and no slope there, none at the ends", () => {
    const line = camberLine(2, 40);
    expect(line.heightAt(0)).toBe(0);
    expect(line.heightAt(0.4)).toBeCloseTo(0.02, 12);
    expect(line.slopeAt(0.4)).toBeCloseTo(0, 12);
    expect(line.heightAt(1)).toBeCloseTo(0, 12);
    expect(line.slopeAt(0)).toBeCloseTo(0.1, 12);
    expect(line.slopeAt(1)).toBeCloseTo(-1 / 15, 12);
    expect(line.heightAt(1.1)).toBeCloseTo(-0.1 / 15, 12);
  });
});

describe("planform", () => {
  it("of a straight taper has the area of a trapezoid", () => {
    const form = planform(
      caseOf({ path: straight, wing: { span_m: 2.4, root_chord_m: 0.36, tip_chord_m: 0.24, sweep_deg: 45 } })
        .wing,
    );
    expect(form.areaM2).toBeCloseTo(0.72, 12);
    expect(form.meanChordM).toBeCloseTo(0.3, 12);
    expect(form.chordAt(-0.6)).toBeCloseTo(0.3, 12);
    expect(form.aftAt(-0.6)).toBeCloseTo(0.6, 12);
  });

  it("by table refuses places that do not rise from 0 to 1", () => {
    const wing = (fractions: number[]) =>
      caseOf({
        path: straight,
        wing: { ...speckWing, stations: fractions.map((f) => ({ half_span_fraction: f, chord_m: 0.1 })) },
      }).wing;
    expect(() => planform(wing([0, 0.5, 0.5, 1]))).toThrow(/do not rise from 0 to 1/);
    expect(() => planform(wing([0.1, 1]))).toThrow(/do not rise from 0 to 1/);
  });
});

describe("section polar", () => {
  it("rises with its slope from the angle without lift and is capped", () => {
    const polar = sectionPolar(rotorOf({}).polar, "rotors.1");
    const degree = Math.PI / 180;
    expect(polar.cl(-2 * degree)).toBeCloseTo(0, 12);
    expect(polar.cl(8 * degree)).toBeCloseTo(5.7 * 10 * degree, 12);
    expect(polar.cl(40 * degree)).toBe(1.3);
    expect(polar.cl(-40 * degree)).toBe(-0.9);
    expect(polar.cd(40 * degree)).toBeCloseTo(0.012 + 0.01 * 1.69, 12);
    expect(polar.cl(polar.alphaForCl(0.6))).toBeCloseTo(0.6, 12);
  });

  it("takes a table, linear in between, constant outside, and finds the angle before the stall", () => {
    const table = [
      { alpha_deg: -10, cl: -0.8, cd: 0.03 },
      { alpha_deg: 10, cl: 1.2, cd: 0.02 },
      { alpha_deg: 20, cl: 0.6, cd: 0.2 },
    ];
    const polar = sectionPolar(rotorOf({ polar: { table } }).polar, "rotors.1");
    expect(polar.cl(0)).toBeCloseTo(0.2, 12);
    expect(polar.cd((15 * Math.PI) / 180)).toBeCloseTo(0.11, 12);
    expect(polar.cl(1)).toBe(0.6);
    expect(polar.alphaForCl(0.7)).toBeCloseTo((5 * Math.PI) / 180, 12);
    const falling = rotorOf({ polar: { table: [table[1]!, table[0]!] } }).polar;
    expect(() => sectionPolar(falling, "rotors.1")).toThrow(/row 2 of a polar/);
  });
});

describe("blade layout", () => {
  it("turns the design flow into chord and pitch: tan φ = 0.8/3.5 at the tip of a turbine", () => {
    const rotor = rotorOf({ design_tip_speed_ratio: 3.5, blades: 3 });
    const polar = sectionPolar(rotor.polar, "rotors.1");
    const { edgeRadii, edgePitches, edgeChords } = bladeLayout(rotor, polar, "rotors.1");
    expect(edgeRadii[0]).toBe(0.2);
    expect(edgeRadii.at(-1)).toBeCloseTo(1, 12);
    const flow = Math.atan(0.8 / 3.5);
    expect(edgePitches.at(-1)).toBeCloseTo(flow - polar.alphaForCl(0.6), 12);
    // 8π·0.2·0.8 / (3·0.6·W²·cos φ), W² = 0.64 + 12.25.
    expect(edgeChords.at(-1)).toBeCloseTo((8 * Math.PI * 0.16) / (1.8 * 12.89 * Math.cos(flow)), 12);
  });

  it("refuses a hub outside the tip and stations out of order", () => {
    const polar = sectionPolar(rotorOf({}).polar, "rotors.1");
    const build = (rotor: object) => () => bladeLayout(rotorOf(rotor), polar, "rotors.1");
    expect(build({ hub_radius_m: 1 })).toThrow(/have no length/);
    const stations = [0.5, 0.3].map((f) => ({ radius_fraction: f, chord_m: 0.1, pitch_deg: 5 }));
    expect(build({ stations })).toThrow(/station 2 of a blade/);
  });
});
