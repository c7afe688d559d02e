import type { Lattice, Points, Velocities } from "../../workers/model/kernel/index.ts";

const f = Math.fround;

/** Difference of two coordinates, each written as the sum of two singles. */
function difference(p: number, x: number): number {
  const lowP = f(p - f(p));
  const lowX = f(x - f(x));
  return f(f(f(p) - f(x)) + f(lowP - lowX));
}

/** One end of an edge as the mixed-precision lanes see it. */
interface End {
  readonly r: readonly [number, number, number];
  readonly distance: number;
}

function endAt(l: Lattice, i: number, p: readonly [number, number, number]): End {
  const x = difference(p[0], l.x[i]!);
  const y = difference(p[1], l.y[i]!);
  const z = difference(p[2], l.z[i]!);
  const square = f(f(f(f(f(x * x) + f(y * y)) + f(z * z))) + f(l.core[i]! * l.core[i]!));
  return { r: [x, y, z], distance: f(Math.sqrt(square)) };
}

function addEdge(
  l: Lattice,
  from: number,
  to: number,
  gamma: number,
  far: number,
  near: End,
  sum: number[],
): void {
  const ex = difference(l.x[to]!, l.x[from]!);
  const ey = difference(l.y[to]!, l.y[from]!);
  const ez = difference(l.z[to]!, l.z[from]!);
  const dMu = l.core[to]! - l.core[from]!;
  const length = f(ex * ex + ey * ey + ez * ez + dMu * dMu);
  const floor = f(4 * l.core[from]! * l.core[to]!);
  const g = f(Math.abs(gamma) < 1e-20 ? 0 : gamma * (1 / (2 * Math.PI)));
  const s = f(far + near.distance);
  const den = Math.max(f(f(s * s) - length), floor);
  const k = f(f(g * s) / f(f(far * near.distance) * den));
  const [x, y, z] = near.r;
  sum[0] = f(sum[0]! + f(k * f(f(ey * z) - f(ez * y))));
  sum[1] = f(sum[1]! + f(k * f(f(ez * x) - f(ex * z))));
  sum[2] = f(sum[2]! + f(k * f(f(ex * y) - f(ey * x))));
}

/** The mixed-precision kernel written out with Math.fround, for bit-for-bit comparison. Slow on purpose: it is plain. */
export function mixedKernelModel(lattices: readonly Lattice[], points: Points, out: Velocities): void {
  for (const l of lattices) {
    for (let p = 0; p < points.n; p++) {
      const at = [points.x[p]!, points.y[p]!, points.z[p]!] as const;
      const total = [0, 0, 0];
      let above: End[] = [];
      for (let r = 0; r < l.rows; r++) {
        const row = Array.from({ length: l.cols }, (_, c) => endAt(l, r * l.cols + c, at));
        const sum = [0, 0, 0];
        for (let c = 0; c < l.cols; c++) {
          const node = r * l.cols + c;
          const near = row[c]!;
          if (c > 0) {
            addEdge(
              l,
              node - 1,
              node,
              l.spanwise[r * (l.cols - 1) + c - 1]!,
              row[c - 1]!.distance,
              near,
              sum,
            );
          }
          if (r > 0)
            addEdge(l, node - l.cols, node, l.streamwise[node - l.cols]!, above[c]!.distance, near, sum);
        }
        for (let k = 0; k < 3; k++) total[k] = total[k]! + sum[k]!;
        above = row;
      }
      out.u[p] = out.u[p]! + total[0]!;
      out.v[p] = out.v[p]! + total[1]!;
      out.w[p] = out.w[p]! + total[2]!;
    }
  }
}
