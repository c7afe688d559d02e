import { describe, expect, it } from "vitest";
import {
  createLattice,
  dropRows,
  type Lattice,
  typescriptKernel,
} from "../../../../../workers/model/kernel/index.ts";
import {
  compare,
  filament,
  nodesOf,
  pointsAt,
  seeded,
  sheet,
  still,
  strewn,
} from "../../../../helpers/lattice-samples.ts";

type Vector = readonly [number, number, number];

function velocityAt(lattices: Lattice[], point: Vector): Vector {
  const out = still(1);
  typescriptKernel.induce(lattices, pointsAt([point]), out);
  return [out.u[0]!, out.v[0]!, out.w[0]!];
}

/** Γ/4π ∫ dl×r / (r² + μ²)^{3/2} over one segment, Γ = 1, μ linear along it: Gauss–Legendre, 5 nodes on each of n pieces. */
function quadrature(a: Vector, b: Vector, muA: number, muB: number, p: Vector, pieces: number): Vector {
  const nodes = [0, 0.5384693101056831, 0.906179845938664];
  const weights = [0.5688888888888889, 0.47862867049936647, 0.23692688505618908];
  const e = [b[0] - a[0], b[1] - a[1], b[2] - a[2]] as const;
  const sum = [0, 0, 0];
  for (let i = 0; i < pieces; i++) {
    for (const [k, node] of nodes.entries()) {
      for (const sign of k === 0 ? [1] : [1, -1]) {
        const t = (i + 0.5 + 0.5 * sign * node) / pieces;
        const r = [p[0] - a[0] - t * e[0], p[1] - a[1] - t * e[1], p[2] - a[2] - t * e[2]] as const;
        const mu = muA + t * (muB - muA);
        const cube = (r[0] ** 2 + r[1] ** 2 + r[2] ** 2 + mu * mu) ** 1.5;
        const weight = weights[k]! / (2 * pieces * cube * 4 * Math.PI);
        sum[0]! += weight * (e[1] * r[2] - e[2] * r[1]);
        sum[1]! += weight * (e[2] * r[0] - e[0] * r[2]);
        sum[2]! += weight * (e[0] * r[1] - e[1] * r[0]);
      }
    }
  }
  return [sum[0]!, sum[1]!, sum[2]!];
}

describe("one segment", () => {
  it("is the Rosenhead–Moore integral, with the same or with different cores at its ends", () => {
    const random = seeded(20_260_101);
    const any = (): Vector => [random() - 0.5, random() - 0.5, random() - 0.5];
    for (let i = 0; i < 200; i++) {
      const [a, b, p] = [any(), any(), any()];
      const muA = 0.05 + 0.3 * random();
      const muB = i % 2 === 0 ? muA : 0.05 + 0.3 * random();
      const found = velocityAt([filament([a, b], [muA, muB])], p);
      const wanted = quadrature(a, b, muA, muB, p, 64);
      // Composite quadrature of order 10 on 64 pieces of a function that is smooth over 0.05: better than 1e-12.
      for (const k of [0, 1, 2] as const) expect(Math.abs(found[k] - wanted[k])).toBeLessThan(1e-11);
    }
  });

  it("tends to the finite line of Biot and Savart: Γ (cos β1 - cos β2) / 4πh (Katz & Plotkin, eq. 2.69, from memory)", () => {
    const line = filament(
      [
        [-1, 0, 0],
        [2, 0, 0],
      ],
      1e-7,
    );
    const h = 0.4;
    const speed = (1 / Math.hypot(1, h) + 2 / Math.hypot(2, h)) / (4 * Math.PI * h);
    expect(velocityAt([line], [0, h, 0])[2]).toBeCloseTo(speed, 11);
    expect(velocityAt([line], [0, 0, h])[1]).toBeCloseTo(-speed, 11);
  });

  it("tends to the endless line with a core: Γ h / 2π(h² + μ²), exact for this kernel", () => {
    const line = filament(
      [
        [-1e5, 0, 0],
        [1e5, 0, 0],
      ],
      0.3,
    );
    for (const h of [0.01, 0.3, 2]) {
      // What two ends at a distance L leave out is of relative size (h² + μ²) / 2L²; rounding, of ε (L/h)², is the larger.
      expect(velocityAt([line], [0, h, 0])[2] / (h / (2 * Math.PI * (h * h + 0.09)))).toBeCloseTo(1, 4);
    }
  });

  it("adds up to the same when cut in two", () => {
    const whole = velocityAt(
      [
        filament(
          [
            [0, 0, 0],
            [1, 0.5, 0],
          ],
          0.1,
        ),
      ],
      [0.2, 0.4, 0.3],
    );
    const cut = velocityAt(
      [
        filament(
          [
            [0, 0, 0],
            [0.5, 0.25, 0],
            [1, 0.5, 0],
          ],
          0.1,
        ),
      ],
      [0.2, 0.4, 0.3],
    );
    for (const k of [0, 1, 2] as const) expect(cut[k]).toBeCloseTo(whole[k], 14);
  });
});

describe("a ring on its axis", () => {
  const ring = (m: number, mu: number) =>
    filament(
      Array.from(
        { length: m + 1 },
        (_, i) => [Math.cos((2 * Math.PI * i) / m), Math.sin((2 * Math.PI * i) / m), 0] as const,
      ),
      mu,
    );
  const exact = (z: number, mu: number) => 0.5 / (1 + z * z + mu * mu) ** 1.5;

  it("gives Γ R² / 2(R² + z² + μ²)^{3/2} (exact for this kernel) within 1e-3 at 72 segments", () => {
    for (const z of [0, 0.5, 2]) {
      const [u, v, w] = velocityAt([ring(72, 0.1)], [0, 0, z]);
      expect(Math.abs(w / exact(z, 0.1) - 1)).toBeLessThan(1.3e-3);
      expect(Math.hypot(u, v)).toBeLessThan(1e-15);
    }
  });

  it("closes in on it with the square of the segment length", () => {
    const error = (m: number) => velocityAt([ring(m, 0.1)], [0, 0, 0.5])[2] / exact(0.5, 0.1) - 1;
    expect(error(36) / error(72)).toBeCloseTo(4, 1);
  });
});

describe("the lattice loop", () => {
  it("is the sum of its edges, each taken alone", () => {
    const random = seeded(77_123_456);
    const lattice = sheet(3, 4, random);
    const points = strewn(5, random, 0.4);
    const found = still(5);
    typescriptKernel.induce([lattice], points, found);
    const wanted = still(5);
    const edges: [number, number, number][] = [];
    for (let r = 0; r < 3; r++) {
      for (let c = 0; c < 4; c++) {
        if (c < 3) edges.push([r * 4 + c, r * 4 + c + 1, lattice.spanwise[r * 3 + c]!]);
        if (r < 2) edges.push([r * 4 + c, r * 4 + c + 4, lattice.streamwise[r * 4 + c]!]);
      }
    }
    for (const [a, b, gamma] of edges) {
      const node = (i: number) => [lattice.x[i]!, lattice.y[i]!, lattice.z[i]!] as const;
      const one = filament([node(a), node(b)], [lattice.core[a]!, lattice.core[b]!]);
      one.streamwise[0] = gamma;
      typescriptKernel.induce([one], points, wanted);
    }
    expect(compare(found, wanted).worst).toBeLessThan(1e-14);
  });

  it("mirrors: with z turned over, u and v change sign and w does not, to the bit", () => {
    const random = seeded(8_151_623);
    const lattice = sheet(4, 3, random);
    const points = strewn(6, random, 0.5);
    const before = still(6);
    typescriptKernel.induce([lattice], points, before);
    for (const z of [lattice.z, points.z]) for (let i = 0; i < z.length; i++) z[i] = -z[i]!;
    const after = still(6);
    typescriptKernel.induce([lattice], points, after);
    expect(after.u).toEqual(before.u.map((u) => -u));
    expect(after.v).toEqual(before.v.map((v) => -v));
    expect(after.w).toEqual(before.w);
  });

  it("turns with the frame, within rounding", () => {
    const random = seeded(42_424_242);
    const lattice = sheet(4, 3, random);
    const points = strewn(6, random, 0.5);
    const before = still(6);
    typescriptKernel.induce([lattice], points, before);
    const [c, s] = [Math.cos(0.7), Math.sin(0.7)];
    const turn = (a: Float64Array, b: Float64Array) => {
      for (let i = 0; i < a.length; i++) [a[i], b[i]] = [c * a[i]! - s * b[i]!, s * a[i]! + c * b[i]!];
    };
    turn(lattice.x, lattice.z);
    turn(points.x, points.z);
    turn(before.u, before.w);
    const after = still(6);
    typescriptKernel.induce([lattice], points, after);
    expect(compare(after, before).worst).toBeLessThan(1e-13);
  });

  it("keeps speeds when lengths and circulations double, to the bit", () => {
    const random = seeded(99_887_766);
    const lattice = sheet(4, 3, random);
    const points = strewn(6, random, 0.5);
    const before = still(6);
    typescriptKernel.induce([lattice], points, before);
    const { x, y, z, core, spanwise, streamwise } = lattice;
    for (const a of [x, y, z, core, spanwise, streamwise, points.x, points.y, points.z]) {
      for (let i = 0; i < a.length; i++) a[i] = 2 * a[i]!;
    }
    const after = still(6);
    typescriptKernel.induce([lattice], points, after);
    expect(after).toEqual(before);
  });

  it("stays finite on nodes and on edges, even where the core is a billionth of the edge", () => {
    const thin = filament(
      [
        [0, 0, 0],
        [1, 0.3, 0.1],
        [0.2, 1, 0.7],
      ],
      1e-9,
    );
    const on = [0, 0.1, 0.25, 1 / 3, 0.5, 0.7, 1].map((t) => [t, 0.3 * t, 0.1 * t] as const);
    const out = still(on.length);
    typescriptKernel.induce([thin], pointsAt(on), out);
    for (const a of [out.u, out.v, out.w]) expect(a.every(Number.isFinite)).toBe(true);
  });

  it("feels nothing of the edges that meet at a node", () => {
    const lattice = filament(
      [
        [0, 0, 0],
        [0.3, 0.1, 0.7],
        [0.9, -0.4, 0.2],
      ],
      0.01,
    );
    dropRows(lattice, 2);
    const out = still(2);
    typescriptKernel.induce([lattice], nodesOf([lattice]), out);
    expect([...out.u, ...out.v, ...out.w].every((value) => value === 0)).toBe(true);
  });

  it("adds to what is there, and takes tiny circulations for none", () => {
    const lattice = filament(
      [
        [0, 0, 0],
        [1, 0, 0],
      ],
      0.1,
    );
    lattice.streamwise[0] = 9e-21;
    const out = still(1);
    out.u[0] = 5;
    typescriptKernel.induce([lattice], pointsAt([[0, 1, 0]]), out);
    expect([out.u[0], out.w[0]]).toEqual([5, 0]);
    lattice.streamwise[0] = 2e-20;
    typescriptKernel.induce([lattice], pointsAt([[0, 1, 0]]), out);
    expect(out.w[0]).toBeGreaterThan(1e-22);
  });

  it("takes empty lattices, single nodes and no points", () => {
    const out = still(1);
    typescriptKernel.induce([createLattice(3, 3)], pointsAt([[0, 0, 0]]), out);
    typescriptKernel.induce([filament([[1, 2, 3]], 0.1)], pointsAt([[0, 0, 0]]), out);
    typescriptKernel.induce(
      [
        filament(
          [
            [1, 2, 3],
            [2, 3, 4],
          ],
          0.1,
        ),
      ],
      pointsAt([]),
      out,
    );
    expect([out.u[0], out.v[0], out.w[0]]).toEqual([0, 0, 0]);
  });

  it("names the node whose core is zero, negative or not a number", () => {
    for (const core of [0, -1, Number.NaN]) {
      const lattice = filament(
        [
          [0, 0, 0],
          [1, 0, 0],
        ],
        [0.1, core],
      );
      expect(() => velocityAt([lattice], [0, 1, 0])).toThrow(`a vortex core of ${core} m at row 1, column 0`);
    }
  });
});
