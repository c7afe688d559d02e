import { beforeAll, describe, expect, it } from "vitest";
import {
  createLattice,
  type Lattice,
  type PairKernel,
  type Points,
  treeKernel,
  type Velocities,
  wasmKernel,
} from "../../../../../workers/model/kernel/index.ts";
import { kernelModule } from "../../../../helpers/kernel-module.ts";
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
import { helixWake, wingWake } from "../../../../helpers/wake-samples.ts";

let bytes: Uint8Array;
let exact: PairKernel;
let direct: PairKernel;
beforeAll(async () => {
  bytes = await kernelModule();
  exact = wasmKernel(bytes, "double");
  direct = wasmKernel(bytes, "mixed");
});

const tree = (relativeError: number) => treeKernel({ bytes, relativeError, direct });

function run(kernel: PairKernel, lattices: readonly Lattice[], points: Points): Velocities {
  const out = still(points.n);
  kernel.induce(lattices, points, out);
  return out;
}

const part = (points: Points, from: number, to: number): Points => ({
  x: points.x.slice(from, to),
  y: points.y.slice(from, to),
  z: points.z.slice(from, to),
  n: to - from,
});

const WAKES: [string, () => Lattice[]][] = [
  ["a rotor wake", () => [helixWake(200, 9)]],
  ["a wing wake", () => [wingWake(60, 33)]],
  ["both", () => [helixWake(150, 9), wingWake(50, 25)]],
  ["twelve small rotor wakes", () => Array.from({ length: 12 }, (_, k) => aside(helixWake(40, 7), 0.6 * k))],
  ["a crumpled sheet of random strength", () => [sheet(60, 30, seeded(987_654_321))]],
  ["a single filament of 1500 nodes", () => [helixWake(1500, 1)].map(withCirculation)],
];

function aside(lattice: Lattice, distance: number): Lattice {
  for (let i = 0; i < lattice.y.length; i++) lattice.y[i] = lattice.y[i]! + distance;
  return lattice;
}

/** A one-column lattice has no rings: gives it a circulation along its length. */
function withCirculation(lattice: Lattice): Lattice {
  lattice.streamwise.fill(0.7);
  return lattice;
}

describe("the treecode", () => {
  it.each(WAKES)("keeps its error on %s", (_, wakes) => {
    const lattices = wakes();
    const points = nodesOf(lattices);
    const wanted = run(exact, lattices, points);
    for (const allowed of [1e-2, 1e-3, 1e-4, 1e-5]) {
      const { rms, error, worst } = compare(run(tree(allowed), lattices, points), wanted);
      expect(error / rms).toBeLessThan(allowed);
      expect(worst / rms).toBeLessThan(4 * allowed);
      // Coarser is cheaper: an error far below what is allowed would mean that the tree is not used.
      expect(error / rms).toBeGreaterThan(0.02 * allowed);
    }
  });

  it("keeps its error at points off the wake too", () => {
    const lattices = [wingWake(60, 33)];
    const own = compare(run(exact, lattices, nodesOf(lattices)), still(60 * 33));
    const points = strewn(400, seeded(555_555_555), 3);
    const off = compare(run(tree(1e-3), lattices, points), run(exact, lattices, points));
    expect(off.error / own.error).toBeLessThan(1e-3);
  });

  it("expands to second order: with the distance doubled, the error of the whole falls by 2⁵", () => {
    const lattices = [sheet(40, 30, seeded(333_222_111))];
    const error = (d: number) => {
      const points = pointsAt([
        [2 + d, 1.5, 0.3 * d],
        [2, 1.5 - d, d],
        [2 - d, 1.5, d],
      ]);
      return compare(run(tree(0.1), lattices, points), run(exact, lattices, points)).error;
    };
    expect(Math.log2(error(8) / error(16))).toBeGreaterThan(4.5);
    expect(Math.log2(error(8) / error(16))).toBeLessThan(5.8);
  });

  it("gives a point the same bits alone, among others and in another order", () => {
    const lattices = [wingWake(50, 33)];
    const points = nodesOf(lattices);
    const kernel = tree(1e-3);
    const together = run(kernel, lattices, points);
    for (const [from, to] of [
      [0, 1],
      [7, 12],
      [801, 804],
      [1001, 1650],
    ] as const) {
      const alone = run(kernel, lattices, part(points, from, to));
      expect(alone.u).toEqual(together.u.slice(from, to));
      expect(alone.v).toEqual(together.v.slice(from, to));
      expect(alone.w).toEqual(together.w.slice(from, to));
    }
    const turned = {
      x: points.x.toReversed(),
      y: points.y.toReversed(),
      z: points.z.toReversed(),
      n: points.n,
    };
    expect(run(kernel, lattices, turned).w.toReversed()).toEqual(together.w);
  });

  it("leaves no trace of an earlier call", () => {
    const small = [helixWake(130, 9)];
    const points = nodesOf(small);
    const used = tree(1e-4);
    run(used, [wingWake(120, 41)], points);
    expect(run(used, small, points)).toEqual(run(tree(1e-4), small, points));
  });

  it("hands small wakes, and lattices that induce nothing on themselves, to the direct kernel", () => {
    const straight = filament(
      Array.from({ length: 1100 }, (_, i) => [i / 64, 0, 0] as const),
      0.01,
    );
    for (const lattices of [[wingWake(30, 33)], [straight], [createLattice(4, 4)]]) {
      const points = strewn(21, seeded(777_666_555), 2);
      expect(run(tree(1e-2), lattices, points)).toEqual(run(direct, lattices, points));
    }
  });

  it("adds to what is there", () => {
    const lattices = [wingWake(40, 33)];
    const points = pointsAt([[1, 0.2, 0.1]]);
    const out = still(1);
    tree(1e-3).induce(lattices, points, out);
    const first = out.w[0]!;
    tree(1e-3).induce(lattices, points, out);
    expect(out.w[0]).toBe(2 * first);
  });

  it("names the node whose core is not above zero", () => {
    const lattice = wingWake(40, 33);
    lattice.core[34] = 0;
    expect(() => run(tree(1e-3), [lattice], pointsAt([[0, 0, 0]]))).toThrow(
      "a vortex core of 0 m at row 1, column 1",
    );
  });

  it("carries its error in its name, and refuses errors that it cannot keep or that make no sense", () => {
    expect(tree(1e-3).name).toBe(`${direct.name}+tree(0.001)/1`);
    for (const error of [0, 9e-6, 0.2, Number.NaN]) {
      expect(() => tree(error)).toThrow(`a treecode error of ${error}`);
    }
  });
});
