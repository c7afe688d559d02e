import type { Draw } from "./draw.ts";
import { modelLoop, modelSound } from "./model-like.ts";
import { base, lengthFor, type OnsetScenario } from "./scenario.ts";

function sound(
  draw: Draw,
  change: (x: Float64Array, sd: number, level: number) => void,
  options: { phi?: number | "t3"; periods?: readonly number[] } = {},
): OnsetScenario {
  const n = lengthFor(draw);
  const { x, sd, level, periodsSteps } = base(draw, n, options);
  change(x, sd, level);
  return { channels: { CT: x }, periodsSteps, plannedSteps: n, truth: null };
}

const nothing = () => {};

/** A stable noisy run of 5000 steps. */
export function stableRun(draw: Draw): OnsetScenario {
  const phi = draw.pick([0, 0.5, 0.8, 0.9, 0.95, 0.98, 0.99]);
  const { x, periodsSteps } = base(draw, 5000, { phi });
  return { channels: { CT: x }, periodsSteps, plannedSteps: 5000, truth: null };
}

/** Families of sound histories that look troubled. */
export const LOOK_ALIKES: Readonly<Record<string, (draw: Draw) => OnsetScenario>> = {
  "start-up spike": (draw) =>
    sound(draw, (x, _, level) => {
      const tau = draw.between(1, 0.01 * x.length);
      const size = level * draw.logBetween(10, 1000);
      for (let t = 0; t < x.length; t++) x[t] = x[t]! + size * Math.exp(-t / tau);
    }),
  "slow start-up": (draw) =>
    sound(draw, (x, sd) => {
      const tau = draw.between(0.03, 0.15) * x.length;
      const omega = draw.uniform() < 0.5 ? 0 : (2 * Math.PI) / draw.between(15, 200);
      const size = sd * draw.between(10, 100);
      for (let t = 0; t < x.length; t++) x[t] = x[t]! + size * Math.exp(-t / tau) * Math.cos(omega * t);
    }),
  "start-up like 1/t": (draw) =>
    sound(draw, (x, sd) => {
      const size = sd * draw.between(100, 3000);
      for (let t = 0; t < x.length; t++) x[t] = x[t]! + size / (t + 10);
    }),
  "blade passing": (draw) => {
    const period = draw.pick([8, 12.5, 18, 24, 36]);
    return sound(
      draw,
      (x, sd) => {
        const width = draw.between(0.03, 0.2);
        const size = sd * draw.between(5, 40);
        for (let t = 0; t < x.length; t++) {
          const phase = (t / period) % 1;
          x[t] = x[t]! + size * Math.exp(-(((phase - 0.5) / width) ** 2));
        }
      },
      { periods: draw.uniform() < 0.5 ? [period] : [] },
    );
  },
  "saw-tooth of truncation": (draw) => {
    const k = draw.pick([4, 10, 25, 40]);
    return sound(
      draw,
      (x, sd) => {
        const size = sd * draw.between(2, 20);
        for (let t = 0; t < x.length; t++) x[t] = x[t]! + size * ((t % k) / k);
      },
      { periods: draw.uniform() < 0.5 ? [k] : [] },
    );
  },
  // A beat that the run shows less than three times cannot be told from a growth while it rises for the first time.
  beats: (draw) =>
    sound(
      draw,
      (x, sd) => {
        const one = draw.between(12, 50);
        const other = 1 / (1 / one - 1 / draw.logBetween(3 * one, x.length / 3));
        const size = sd * draw.between(1, 10);
        for (let t = 0; t < x.length; t++) {
          x[t] = x[t]! + size * (Math.sin((2 * Math.PI * t) / one) + Math.sin((2 * Math.PI * t) / other));
        }
      },
      { periods: [] },
    ),
  "change along a loop": (draw) =>
    sound(draw, (x, _, level) => {
      const loop = x.length / draw.between(2.5, 12);
      const change = draw.wave(x.length, loop);
      const size = Math.abs(level) * draw.between(0.05, 0.5);
      for (let t = 0; t < x.length; t++) x[t] = x[t]! + size * change[t]!;
    }),
  "isolated spikes": (draw) =>
    sound(draw, (x, sd) => {
      const count = 1 + Math.floor(draw.uniform() * 3);
      for (let i = 0; i < count; i++) {
        const at = Math.floor(draw.between(0.1, 0.95) * x.length);
        const width = 1 + Math.floor(draw.uniform() * 3);
        const size = draw.sign() * sd * draw.logBetween(15, 1000);
        for (let j = 0; j < width && at + j < x.length; j++) x[at + j] = x[at + j]! + size;
      }
    }),
  "heavy tails": (draw) => sound(draw, nothing, { phi: "t3" }),
  "variance by phase": (draw) => {
    const period = draw.pick([12, 20, 36, 60]);
    return sound(
      draw,
      (x, sd) => {
        const depth = draw.between(0.5, 1);
        const more = draw.noise(x.length, 0.3);
        for (let t = 0; t < x.length; t++) {
          const strength = 3 * depth * Math.max(0, Math.sin((2 * Math.PI * t) / period));
          x[t] = x[t]! + sd * strength * more[t]!;
        }
      },
      { periods: draw.uniform() < 0.5 ? [period] : [] },
    );
  },
  "long memory": (draw) => sound(draw, nothing, { phi: draw.pick([0.95, 0.98, 0.99]) }),
  "settled model": modelSound,
  "model on a loop": modelLoop,
};

/** Trouble within the first tenth: there is no baseline, so no onset may be named. */
export const TOO_EARLY: Readonly<Record<string, (draw: Draw) => OnsetScenario>> = {
  "grows from the start": (draw) => {
    const at = draw.between(0.01, 0.1);
    const rate = draw.logBetween(0.004, 0.05);
    return sound(draw, (x, sd) => {
      const omega = (2 * Math.PI) / draw.between(6, 40);
      const cap = draw.logBetween(10, 1e6);
      for (let t = 0; t < x.length; t++) {
        x[t] = x[t]! + sd * Math.min(cap, Math.exp(rate * (t - at * x.length))) * Math.sin(omega * t);
      }
    });
  },
  "non-finite at the start": (draw) =>
    sound(draw, (x) => x.fill(Number.NaN, draw.between(0, 0.1) * x.length)),
  "loud from the start": (draw) =>
    sound(draw, (x, sd) => {
      const more = draw.noise(x.length, 0.8);
      for (let t = Math.floor(0.05 * x.length); t < x.length; t++) x[t] = x[t]! + 20 * sd * more[t]!;
    }),
};
