import type { RandomStream } from "../random.ts";

/** Stationary noise of unit standard deviation, started from its own distribution. */
export interface Noise {
  readonly name: string;
  /** sqrt of the long-run variance, in standard deviations. */
  readonly longRunSd: number;
  make(random: RandomStream, n: number): Float64Array;
}

/** Independent normal samples. */
export const white: Noise = {
  name: "white",
  longRunSd: 1,
  make: (random, n) => Float64Array.from({ length: n }, () => random.normal()),
};

/** First-order autoregression. */
export function autoregressive(phi: number): Noise {
  const step = Math.sqrt(1 - phi * phi);
  return {
    name: `AR(1) ${phi}`,
    longRunSd: Math.sqrt((1 + phi) / (1 - phi)),
    make: (random, n) => {
      let v = random.normal();
      return Float64Array.from({ length: n }, () => {
        const now = v;
        v = phi * v + step * random.normal();
        return now;
      });
    },
  };
}

/** Second-order autoregression that rings with a period of 20 samples. */
export const ringing: Noise = (() => {
  const r = 0.95;
  const a1 = 2 * r * Math.cos((2 * Math.PI) / 20);
  const a2 = -r * r;
  // Variance of a unit-innovation AR(2), Box & Jenkins, section 3.2 (from memory).
  const sd = Math.sqrt((1 - a2) / ((1 + a2) * ((1 - a2) ** 2 - a1 * a1)));
  return {
    name: "AR(2) ringing",
    longRunSd: 1 / (1 - a1 - a2) / sd,
    make: (random, n) => {
      let one = 0;
      let two = 0;
      const next = () => {
        const v = a1 * one + a2 * two + random.normal();
        two = one;
        one = v;
        return v / sd;
      };
      for (let i = 0; i < 300; i++) next();
      return Float64Array.from({ length: n }, next);
    },
  };
})();

/** Log-normal innovations through AR(1) 0.8: skewness about 2. */
export const skewed: Noise = filtered("skewed AR(1) 0.8", 0.8, (random) => {
  const s = 0.8;
  const shift = Math.exp((s * s) / 2);
  const sd = Math.sqrt((Math.exp(s * s) - 1) * Math.exp(s * s));
  return (Math.exp(s * random.normal()) - shift) / sd;
});

/** Student's t innovations with 4 degrees of freedom through AR(1) 0.8. */
export const heavyTailed: Noise = filtered("heavy-tailed AR(1) 0.8", 0.8, (random) => {
  let chi = 0;
  for (let i = 0; i < 4; i++) chi += random.normal() ** 2;
  return random.normal() / Math.sqrt(chi / 4) / Math.SQRT2;
});

function filtered(name: string, phi: number, innovation: (random: RandomStream) => number): Noise {
  const step = Math.sqrt(1 - phi * phi);
  return {
    name,
    longRunSd: Math.sqrt((1 + phi) / (1 - phi)),
    make: (random, n) => {
      let v = 0;
      for (let i = 0; i < 100; i++) v = phi * v + step * innovation(random);
      return Float64Array.from({ length: n }, () => {
        v = phi * v + step * innovation(random);
        return v;
      });
    },
  };
}
