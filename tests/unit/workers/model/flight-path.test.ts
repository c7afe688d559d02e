import { describe, expect, it } from "vitest";
import type { Case } from "../../../../orchestrator/contract/case-schema.ts";
import { type FlightPath, flightPath } from "../../../../workers/model/path/flight-path.ts";
import { addScaled, cross, dot, norm, type Vec3 } from "../../../../workers/model/vec3.ts";
import { type CaseInput, caseOf, speckWing } from "../../../helpers/run-case.ts";

const pathOf = (path: CaseInput["path"], wind: CaseInput["wind"] = {}): FlightPath => {
  const inputs: Case = caseOf({ path, wind, wing: speckWing });
  return flightPath(inputs);
};

const far = (a: Vec3, b: Vec3): number => norm(addScaled(a, b, -1));

/** Velocity and spin of a path against central differences of its places and axes. */
function expectConsistent(path: FlightPath, times: readonly number[]): void {
  const h = 1e-5;
  for (const t of times) {
    const [before, now, after] = [path.poseAt(t - h), path.poseAt(t), path.poseAt(t + h)];
    expect(
      far(
        now.velocity,
        addScaled(after.position, before.position, -1).map((x) => x / (2 * h)) as unknown as Vec3,
      ),
    ).toBeLessThan(1e-6 * norm(now.velocity));
    expect(far(now.span, cross(now.forward, now.normal))).toBeLessThan(1e-12);
    expect(Math.abs(dot(now.forward, now.normal))).toBeLessThan(1e-12);
    for (const key of ["forward", "span", "normal"] as const) {
      const turned = addScaled(after[key], before[key], -1).map((x) => x / (2 * h)) as unknown as Vec3;
      expect(far(turned, cross(now.spin, now[key]))).toBeLessThan(1e-4 * (1 + norm(now.spin)));
    }
  }
}

describe("straight path", () => {
  it("flies into the wind, right tip towards +y, and meets flight speed plus wind", () => {
    const path = pathOf({ kind: "straight", speed_mps: 12 }, { speed_mps: 3 });
    expect(path.poseAt(2).position).toEqual([-24, 0, 0]);
    expect(path.poseAt(2).span).toEqual([0, 1, 0]);
    expect(path.designApparent).toEqual([-15, 0, 0]);
    expectConsistent(path, [0, 1]);
  });
});

describe("circle", () => {
  const tilted = {
    kind: "circle",
    radius_m: 3,
    speed_mps: 20,
    speed_variation_percent: 30,
    tilt_deg: 25,
    start_deg: 40,
  } as const;

  it("moves and turns as its places and axes say", () => {
    expectConsistent(pathOf(tilted, { speed_mps: 8 }), [0, 0.3, 0.71, 5]);
  });

  it("starts at start_deg, turning upwards, upper side downwind, right tip outwards", () => {
    const pose = pathOf({ kind: "circle", radius_m: 3, speed_mps: 20, start_deg: 90 }).poseAt(0);
    expect(far(pose.position, [0, 0, 3])).toBeLessThan(1e-12);
    expect(far(pose.normal, [1, 0, 0])).toBeLessThan(1e-12);
    expect(far(pose.span, [0, 0, 1])).toBeLessThan(1e-12);
    const right = pathOf({ kind: "circle", radius_m: 3, speed_mps: 20 }).poseAt(0);
    expect(right.velocity[2]).toBeCloseTo(20, 12);
  });

  it("is fastest at the bottom by the variation, slowest at the top, and closes after its loop", () => {
    const path = pathOf({ kind: "circle", radius_m: 3, speed_mps: 20, speed_variation_percent: 30 });
    const loop = path.loopSeconds!;
    const looks = Array.from({ length: 4000 }, (_, i) => path.poseAt((i / 4000) * loop));
    const fastest = looks.reduce((a, b) => (norm(b.velocity) > norm(a.velocity) ? b : a));
    const slowest = looks.reduce((a, b) => (norm(b.velocity) < norm(a.velocity) ? b : a));
    expect(norm(fastest.velocity)).toBeCloseTo(26, 4);
    expect(norm(slowest.velocity)).toBeCloseTo(14, 4);
    expect(fastest.position[2]).toBeCloseTo(-3, 4);
    expect(slowest.position[2]).toBeCloseTo(3, 4);
    expect(far(path.poseAt(loop).position, path.poseAt(0).position)).toBeLessThan(1e-9);
    // ∫ ds / v over the circle, by hand: 2πR / (V √(1 - ε²)).
    expect(loop).toBeCloseTo((2 * Math.PI * 3) / (20 * Math.sqrt(1 - 0.09)), 12);
  });

  it("says that it varies only where something does", () => {
    const plain = { kind: "circle", radius_m: 3, speed_mps: 20 } as const;
    expect(pathOf(plain, { speed_mps: 8 }).varies).toBe(false);
    expect(pathOf({ ...plain, tilt_deg: 10 }, { speed_mps: 8 }).varies).toBe(true);
    expect(pathOf(plain, { speed_mps: 8, shear_exponent: 0.2 }).varies).toBe(true);
    expect(pathOf({ ...plain, speed_variation_percent: 5 }).varies).toBe(true);
  });
});

describe("table of positions", () => {
  const circle = pathOf({ kind: "circle", radius_m: 3, speed_mps: 20 }, { speed_mps: 8 });
  const loop = circle.loopSeconds!;
  const table = (n: number) =>
    Array.from({ length: n + 1 }, (_, i) => {
      const time = (i / n) * loop;
      const [x, y, z] = circle.poseAt(i === n ? 0 : time).position;
      return { time_s: time, x_m: x, y_m: y, z_m: z };
    });

  it("moves and turns as its places and axes say", () => {
    expectConsistent(pathOf({ kind: "table", points: table(24), closed: true }), [0.1, 0.33, 1.7]);
  });

  it("comes close to a circle through its points, in the fourth order of their spacing", () => {
    const error = (n: number) => {
      const path = pathOf({ kind: "table", points: table(n), closed: true }, { speed_mps: 8 });
      const looks = Array.from({ length: 97 }, (_, i) => (i / 97) * loop);
      return Math.max(...looks.map((t) => far(path.poseAt(t).position, circle.poseAt(t).position)));
    };
    const errors = [12, 24, 48].map(error);
    expect(errors[2]).toBeLessThan(1e-5);
    expect(Math.log2(errors[0]! / errors[1]!)).toBeGreaterThan(3.7);
    expect(Math.log2(errors[1]! / errors[2]!)).toBeGreaterThan(3.7);
  });

  it("repeats where it is closed, and has the circle's apparent wind", () => {
    const path = pathOf({ kind: "table", points: table(48), closed: true }, { speed_mps: 8 });
    expect(far(path.poseAt(loop + 0.2).position, path.poseAt(0.2).position)).toBeLessThan(1e-9);
    expect(far(path.designApparent, circle.designApparent)).toBeLessThan(1e-3);
  });

  it("goes on straight after the last point of an open table", () => {
    const points = [0, 1, 2, 3].map((t) => ({ time_s: t, x_m: -10 * t, y_m: t * t, z_m: 0 }));
    const path = pathOf({ kind: "table", points, normal: "up" });
    const [end, later] = [path.poseAt(3), path.poseAt(5)];
    expect(far(later.position, addScaled(end.position, end.velocity, 2))).toBeLessThan(1e-9);
  });

  it("names what is wrong with a table", () => {
    const line = [0, 1, 2, 3].map((t) => ({ time_s: t, x_m: -10 * t, y_m: 0, z_m: 0 }));
    const build =
      (points: typeof line, rest = {}) =>
      () =>
        pathOf({ kind: "table", points, ...rest });
    expect(build(line)).toThrow(/flies along the direction in which its upper side/);
    expect(build(line.map((p) => ({ ...p, x_m: 0 })))).toThrow(/stands still/);
    expect(build([line[0]!, line[2]!, line[1]!, line[3]!])).toThrow(/point 3 .* is not after the one before/);
    expect(build(line.map((p) => ({ ...p, time_s: p.time_s + 1 })))).toThrow(/first point stands at 1 s/);
    expect(build(line, { closed: true, normal: "up" })).toThrow(/closed path ends 30 m from where it began/);
  });
});
