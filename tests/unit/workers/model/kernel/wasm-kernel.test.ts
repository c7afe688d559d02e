import { createHash } from "node:crypto";
import fc from "fast-check";
import { beforeAll, describe, expect, it } from "vitest";
import {
  type KernelVariant,
  kernelAgrees,
  type Lattice,
  type Points,
  typescriptKernel,
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
import { mixedKernelModel } from "../../../../helpers/mixed-kernel-model.ts";

let bytes: Uint8Array;
beforeAll(async () => {
  bytes = await kernelModule();
});

type Induce = (lattices: readonly Lattice[], points: Points, out: Velocities) => void;

function run(induce: Induce, lattices: readonly Lattice[], points: Points): Velocities {
  const out = still(points.n);
  out.u.fill(0.125);
  induce(lattices, points, out);
  return out;
}

const hash = (v: Velocities) => {
  const sha = createHash("sha256");
  for (const a of [v.u, v.v, v.w]) sha.update(new Uint8Array(a.buffer));
  return sha.digest("hex").slice(0, 16);
};

const cases = fc.record({
  seed: fc.integer({ min: 100_000, max: 2_000_000_000 }),
  shapes: fc.array(
    fc.tuple(
      fc.integer({ min: 0, max: 7 }),
      fc.oneof(fc.integer({ min: 1, max: 6 }), fc.constantFrom(15, 16, 17, 35)),
    ),
    {
      maxLength: 3,
    },
  ),
  strewnPoints: fc.integer({ min: 0, max: 9 }),
  pitch: fc.constantFrom(1e-3, 0.1, 50),
});

function both(variant: KernelVariant, reference: Induce): void {
  const kernel = wasmKernel(bytes, variant);
  fc.assert(
    fc.property(cases, ({ seed, shapes, strewnPoints, pitch }) => {
      const random = seeded(seed);
      const lattices = shapes.map(([rows, cols]) => sheet(rows, cols, random, pitch));
      for (const points of [strewn(strewnPoints, random, 6 * pitch), nodesOf(lattices)]) {
        expect(run(kernel.induce, lattices, points)).toEqual(run(reference, lattices, points));
      }
    }),
    { numRuns: 150, seed: 20_261_201 },
  );
}

describe("the compiled kernel", () => {
  it("gives the bits of the TypeScript loop in double precision, and has its name", () => {
    both("double", typescriptKernel.induce);
    expect(wasmKernel(bytes, "double").name).toBe(typescriptKernel.name);
  });

  it("gives the bits of the Math.fround model in mixed precision, and has another name", () => {
    both("mixed", mixedKernelModel);
    expect(wasmKernel(bytes, "mixed").name).not.toBe(typescriptKernel.name);
  });

  it("keeps those bits on the filament itself, with cores of a thousandth to a millionth of the edge", () => {
    for (const core of [1e-3, 1e-5, 1e-6]) {
      const thin = filament(
        [
          [0, 0, 0],
          [1, 0.3, 0.1],
          [0.2, 1, 0.7],
        ],
        core,
      );
      const points = pointsAt([0, 0.1, 0.25, 1 / 3, 0.5, 0.7, 1].map((t) => [t, 0.3 * t, 0.1 * t] as const));
      const mixed = run(wasmKernel(bytes, "mixed").induce, [thin], points);
      expect(mixed).toEqual(run(mixedKernelModel, [thin], points));
      expect([...mixed.u, ...mixed.v, ...mixed.w].every(Number.isFinite)).toBe(true);
      expect(run(wasmKernel(bytes, "double").induce, [thin], points)).toEqual(
        run(typescriptKernel.induce, [thin], points),
      );
    }
  });

  it("in mixed precision, feels nothing of the edges that meet at a node, however thin their core", () => {
    const thin = filament(
      [
        [100.1, 3, 0],
        [100.4, 3.1, 0.7],
      ],
      1e-6,
    );
    const out = run(wasmKernel(bytes, "mixed").induce, [thin], nodesOf([thin]));
    expect([...out.u.map((u) => u - 0.125), ...out.v, ...out.w].every((value) => value === 0)).toBe(true);
  });

  it("in mixed precision, errs by less than 1e-6 of the mean speed, 2e-5 at the worst, near the origin and far from it", () => {
    for (const away of [0, 300]) {
      const random = seeded(31_415_926);
      const lattices = [sheet(30, 10, random), sheet(20, 25, random)];
      for (const l of lattices) for (let i = 0; i < l.x.length; i++) l.x[i] = l.x[i]! + away;
      const points = nodesOf(lattices);
      const { rms, error, worst } = compare(
        run(wasmKernel(bytes, "mixed").induce, lattices, points),
        run(typescriptKernel.induce, lattices, points),
      );
      expect(error / rms).toBeLessThan(1e-6);
      expect(worst / rms).toBeLessThan(2e-5);
    }
  });

  it.each(["double", "mixed"] as const)(
    "gives a point the same bits alone as among thousands (%s)",
    (variant) => {
      const random = seeded(271_828_182);
      const lattices = [sheet(6, 4, random), sheet(3, 7, random)];
      const points = strewn(4101, random, 0.6);
      const kernel = wasmKernel(bytes, variant);
      const together = run(kernel.induce, lattices, points);
      for (const [from, to] of [
        [0, 1],
        [1, 3],
        [2045, 2052],
        [4095, 4101],
      ] as const) {
        const part = {
          x: points.x.slice(from, to),
          y: points.y.slice(from, to),
          z: points.z.slice(from, to),
          n: to - from,
        };
        const alone = run(kernel.induce, lattices, part);
        expect(alone.u).toEqual(together.u.slice(from, to));
        expect(alone.w).toEqual(together.w.slice(from, to));
      }
    },
  );

  it.each(["double", "mixed"] as const)("leaves no trace of an earlier, larger call (%s)", (variant) => {
    const random = seeded(161_803_398);
    const small = [sheet(3, 3, random)];
    const large = [sheet(120, 120, random)];
    const points = strewn(7, random, 0.4);
    const used = wasmKernel(bytes, variant);
    run(used.induce, small, points);
    run(used.induce, large, points);
    expect(run(used.induce, small, points)).toEqual(run(wasmKernel(bytes, variant).induce, small, points));
  });

  it("keeps the double-precision bits that earlier versions gave", () => {
    const random = seeded(1_234_567_890);
    const lattices = [
      sheet(12, 5, random),
      sheet(7, 9, random),
      filament(
        [
          [0, 0, 0],
          [1, 1, 1],
          [2, 0, 1],
        ],
        0.05,
      ),
    ];
    expect(hash(run(typescriptKernel.induce, lattices, nodesOf(lattices)))).toBe("42f7d1f4ac10e02e");
    const far = strewn(33, random, 20);
    expect(hash(run(wasmKernel(bytes, "double").induce, lattices, far))).toBe("3960da4d043f13cb");
  });

  it("names the node whose core is not above zero", () => {
    const lattice = filament(
      [
        [0, 0, 0],
        [1, 0, 0],
      ],
      [0.1, 0],
    );
    for (const variant of ["double", "mixed"] as const) {
      expect(() => run(wasmKernel(bytes, variant).induce, [lattice], pointsAt([[0, 1, 0]]))).toThrow(
        "a vortex core of 0 m at row 1, column 0",
      );
    }
  });

  it("refuses bytes that are no module", () => {
    expect(() => wasmKernel(new Uint8Array([0, 1, 2, 3]), "mixed")).toThrow("does not load here");
  });
});

describe("the self-test", () => {
  it("passes both variants, and tells mixed precision from double", () => {
    expect(kernelAgrees(wasmKernel(bytes, "double"), typescriptKernel, 0)).toBe(true);
    expect(kernelAgrees(wasmKernel(bytes, "mixed"), typescriptKernel, 5e-6)).toBe(true);
    expect(kernelAgrees(wasmKernel(bytes, "mixed"), typescriptKernel, 1e-8)).toBe(false);
  });
});
