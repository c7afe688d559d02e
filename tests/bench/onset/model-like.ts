import type { Draw } from "./draw.ts";
import type { OnsetScenario } from "./scenario.ts";

// Histories like those of a deterministic free-wake model: no noise but what the wake makes, a start-up that decays
// slowly, a period of 12 or 18 steps, 400 to 800 steps in all. Invented shapes and numbers, not computed by a model.

/** Start-up that settles to a periodic signal with deviations of 1e-4 of the level that come from slow wake motion. */
function settling(draw: Draw, n: number, period: number): { x: Float64Array; level: number } {
  const level = draw.between(0.2, 0.8);
  const wave = draw.wave(n, period);
  const ripple = level * draw.between(0.002, 0.01);
  const [fast, slow] = [draw.between(0.5, 2) * period, draw.between(1.5, 3) * period];
  const startUp = level * draw.between(0.1, 0.4);
  const settlingWave = draw.wave(n, period * draw.between(0.8, 1.2));
  const wander = draw.wave(n, draw.between(3, 9) * period);
  const dust = level * draw.logBetween(1e-6, 1e-4);
  const x = Float64Array.from({ length: n }, (_, t) => {
    const start = startUp * (Math.exp(-t / fast) + 0.1 * Math.exp(-t / slow) * settlingWave[t]!);
    return level - start + ripple * wave[t]! + dust * wander[t]!;
  });
  return { x, level };
}

/** Wave-like irregularity of unit strength: three incommensurate waves of rotor-like and slower periods. */
function irregular(draw: Draw, n: number, period: number): Float64Array {
  const periods = [0.37, 0.71, 1.9, 4.3].map((f) => f * period * draw.between(0.9, 1.1));
  const waves = periods.map((p) => draw.wave(n, p));
  return Float64Array.from({ length: n }, (_, t) => waves.reduce((sum, w) => sum + w[t]!, 0) / 2);
}

/** Settled from revolution 8 on, then the mean falls by 15 to 20 % and the fluctuations rise within three revolutions. */
export function modelBreakdown(draw: Draw): OnsetScenario {
  const period = draw.pick([12, 18]);
  const revolutions = draw.pick([36, 40, 48]);
  const n = period * revolutions;
  const { x, level } = settling(draw, n, period);
  const onset = Math.round(period * draw.between(22, 28));
  const rise = draw.between(1.5, 3) * period;
  const fall = level * draw.between(0.15, 0.2);
  const fluctuation = level * draw.between(0.08, 0.14);
  const wild = irregular(draw, n, period);
  for (let t = onset; t < n; t++) {
    const grown = Math.min(1, (t - onset) / rise);
    x[t] = x[t]! - fall * grown * grown + fluctuation * grown * grown * wild[t]!;
  }
  return {
    channels: { CN: x },
    periodsSteps: [period],
    plannedSteps: n,
    truth: {
      onset,
      accepted: ["wake-breakdown", "growing-oscillation", "blow-up"],
      rate: null,
    },
  };
}

/** The same without trouble. */
export function modelSound(draw: Draw): OnsetScenario {
  const period = draw.pick([12, 18]);
  const n = period * draw.pick([24, 36, 40, 48]);
  return {
    channels: { CN: settling(draw, n, period).x },
    periodsSteps: [period],
    plannedSteps: n,
    truth: null,
  };
}

/** The same around a loop flown more than once, whose loads change with the place on it, the loop declared or not. */
export function modelLoop(draw: Draw): OnsetScenario {
  const period = draw.pick([12, 18]);
  const n = period * draw.pick([40, 60]);
  const { x, level } = settling(draw, n, period);
  const loop = period * draw.pick([10, 20, 30]);
  const change = draw.wave(n, loop);
  const ripple = draw.wave(n, period);
  const size = level * draw.between(0.02, 0.15);
  for (let t = 0; t < n; t++) x[t] = x[t]! + size * change[t]! * (1 + 0.1 * ripple[t]!);
  const periodsSteps = draw.uniform() < 0.5 ? [period, loop] : [period];
  return { channels: { CN: x }, periodsSteps, plannedSteps: n, truth: null };
}
