/**
 * Pairing of an infinite straight row of equal point vortices, simulated: N vortices in a period, perturbed in the
 * eigenvector of phase phi between neighbours, fourth-order Runge–Kutta.
 *
 *   u − iv from periodic images: u = −(G/2L)·sinh(k·dy)/(cosh(k·dy) − cos(k·dx)), v = (G/2L)·sin(k·dx)/(...), k = 2π/L
 *   growth rate of the linear theory: G·phi·(2π − phi)/(4π·h²)
 *
 * @see Lamb (1932), Hydrodynamics, art. 156 (rate, from memory)
 * @returns displacement of the first vortex and the root mean square of all, one entry a step
 */
export function simulateVortexRow(options: {
  vortices: number;
  phase: number;
  dt: number;
  steps: number;
  perturbedAt: number;
  size: number;
}): { dy: Float64Array; rms: Float64Array } {
  const { vortices: n, phase, dt, steps } = options;
  let state = Float64Array.from({ length: 2 * n }, (_, i) => (i < n ? i : 0));
  const dy = new Float64Array(steps);
  const rms = new Float64Array(steps);
  for (let t = 0; t < steps; t++) {
    if (t === options.perturbedAt) {
      state = state.map((v, i) =>
        i < n ? v + options.size * Math.cos(i * phase) : v - options.size * Math.cos((i - n) * phase),
      );
    }
    if (t >= options.perturbedAt) state = step(state, n, dt);
    let sum = 0;
    for (let i = 0; i < n; i++) sum += (state[i]! - i) ** 2 + state[n + i]! ** 2;
    dy[t] = state[n]!;
    rms[t] = Math.sqrt(sum / n);
  }
  return { dy, rms };
}

function step(s: Float64Array, n: number, dt: number): Float64Array<ArrayBuffer> {
  const add = (k: Float64Array, h: number) => s.map((v, i) => v + h * k[i]!);
  const k1 = rate(s, n);
  const k2 = rate(add(k1, dt / 2), n);
  const k3 = rate(add(k2, dt / 2), n);
  const k4 = rate(add(k3, dt), n);
  return Float64Array.from(s, (v, i) => v + (dt / 6) * (k1[i]! + 2 * k2[i]! + 2 * k3[i]! + k4[i]!));
}

function rate(s: Float64Array, n: number): Float64Array {
  const k = (2 * Math.PI) / n;
  const out = new Float64Array(2 * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      if (i === j) continue;
      const x = k * (s[i]! - s[j]!);
      const y = k * (s[n + i]! - s[n + j]!);
      const below = Math.cosh(y) - Math.cos(x);
      out[i] = out[i]! - Math.sinh(y) / below / (2 * n);
      out[n + i] = out[n + i]! + Math.sin(x) / below / (2 * n);
    }
  }
  return out;
}
