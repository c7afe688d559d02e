import { seededNormal, seededUniform } from "../../helpers/seeded.ts";

/** Random numbers of one history. */
export class Draw {
  readonly uniform: () => number;
  readonly normal: () => number;

  constructor(seed: number) {
    this.uniform = seededUniform(seed);
    this.normal = seededNormal(this.uniform);
  }

  between(low: number, high: number): number {
    return low + (high - low) * this.uniform();
  }

  logBetween(low: number, high: number): number {
    return low * (high / low) ** this.uniform();
  }

  pick<T>(choices: readonly T[]): T {
    return choices[Math.floor(this.uniform() * choices.length)]!;
  }

  sign(): number {
    return this.uniform() < 0.5 ? -1 : 1;
  }

  /** Unit-variance noise: autoregressive with coefficient phi, or Student t with 3 degrees of freedom. */
  noise(n: number, phi: number | "t3"): Float64Array {
    const out = new Float64Array(n);
    const white = () => (phi === "t3" ? this.student3() : this.normal());
    const memory = phi === "t3" ? 0 : phi;
    const gain = Math.sqrt(1 - memory * memory);
    let state = white();
    for (let t = 0; t < n; t++) {
      out[t] = state;
      state = memory * state + gain * white();
    }
    return out;
  }

  private student3(): number {
    let chi = 0;
    for (let i = 0; i < 3; i++) chi += this.normal() ** 2;
    return this.normal() / Math.sqrt(chi / 3) / Math.sqrt(3);
  }

  /** A waveform of the given period with a few harmonics and standard deviation of about 1. */
  wave(n: number, period: number): Float64Array {
    const parts = [1, 0.5, 0.25].map((a) => ({
      a: a * this.between(0.5, 1.5),
      phase: this.between(0, 6.28),
    }));
    return Float64Array.from({ length: n }, (_, t) =>
      parts.reduce(
        (sum, { a, phase }, h) => sum + a * Math.sin((2 * Math.PI * (h + 1) * t) / period + phase),
        0,
      ),
    );
  }
}
