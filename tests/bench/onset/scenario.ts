import type { OnsetKind } from "../../../orchestrator/contract/index.ts";
import type { Draw } from "./draw.ts";

// Histories of our own invention with known onsets, and sound ones that look troubled. Every draw is seeded.

/** One history with what is true of it. */
export interface OnsetScenario {
  readonly channels: Record<string, Float64Array>;
  readonly periodsSteps: readonly number[];
  readonly plannedSteps: number;
  /** Null for a sound history. */
  readonly truth: {
    readonly onset: number;
    readonly accepted: readonly OnsetKind[];
    /** E-folds a step; null for abrupt kinds. */
    readonly rate: number | null;
  } | null;
}

/** A sound history to build on. */
export interface Base {
  readonly x: Float64Array;
  /** Standard deviation of the noise. */
  readonly sd: number;
  readonly level: number;
  readonly periodsSteps: readonly number[];
  readonly phi: number | "t3";
}

const MEMORIES = [0, 0, 0.5, 0.8, 0.9] as const;
const PERIODS = [[], [], [10], [20], [36], [36, 10], [18.3]] as const;

/** A sound history: level, start-up, declared periods, noise. */
export function base(
  draw: Draw,
  n: number,
  options: { phi?: number | "t3"; periods?: readonly number[] } = {},
): Base {
  const level = draw.logBetween(0.1, 2) * draw.sign();
  const sd = Math.abs(level) * draw.logBetween(1e-3, 2e-2);
  const phi = options.phi ?? draw.pick(MEMORIES);
  const periodsSteps = options.periods ?? draw.pick<readonly number[]>(PERIODS);
  const noise = draw.noise(n, phi);
  const x = Float64Array.from(noise, (e) => level + sd * e);
  const tau = draw.between(0.005, 0.02) * n;
  const spike = level * draw.between(-5, 5);
  for (let t = 0; t < n; t++) x[t] = x[t]! + spike * Math.exp(-t / tau);
  for (const period of periodsSteps) {
    const amplitude = sd * draw.between(0.5, 6);
    const wave = draw.wave(n, period);
    for (let t = 0; t < n; t++) x[t] = x[t]! + amplitude * wave[t]!;
  }
  return { x, sd, level, periodsSteps, phi };
}

/** One of the usual lengths. */
export function lengthFor(draw: Draw): number {
  return draw.pick([1500, 2000, 3000, 4000, 5000]);
}
