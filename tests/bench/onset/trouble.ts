import type { OnsetKind } from "../../../orchestrator/contract/index.ts";
import { simulateVortexRow } from "../../helpers/vortex-row.ts";
import type { Draw } from "./draw.ts";
import { modelBreakdown } from "./model-like.ts";
import { base, lengthFor, type OnsetScenario } from "./scenario.ts";

function troubled(
  draw: Draw,
  accepted: readonly OnsetKind[],
  rate: number | null,
  change: (x: Float64Array, at: number, sd: number, phi: number | "t3") => Float64Array | undefined,
  options: { phi?: number; periods?: readonly number[] } = {},
): OnsetScenario {
  const n = lengthFor(draw);
  const { x, sd, periodsSteps, phi } = base(draw, n, options);
  // Nothing can be told before the monitors have a reference: 14 blocks past the skipped tenth, 36 samples at most.
  const onset = Math.round(draw.between(Math.max(0.35 * n, 0.1 * n + 20 * 36), 0.7 * n));
  const out = change(x, onset, sd, phi) ?? x;
  return { channels: { CT: out }, periodsSteps, plannedSteps: n, truth: { onset, accepted, rate } };
}

/** A wave of random phase whose root mean square is the noise's at the onset. */
function addOscillation(
  draw: Draw,
  x: Float64Array,
  at: number,
  o: { sd: number; rate: number; cap: number },
) {
  const omega = (2 * Math.PI) / draw.between(6, 40);
  const phase = draw.between(0, 6.28);
  const memory = draw.noise(x.length, 0.8);
  for (let t = 0; t < x.length; t++) {
    const amplitude = Math.SQRT2 * o.sd * Math.exp(Math.min(o.rate * (t - at), Math.log(o.cap)));
    // A saturated wave loses its regularity: noise of the same strength takes its place within an e-fold.
    const chaotic = Number.isFinite(o.cap)
      ? 1 / (1 + Math.exp(-2 * (o.rate * (t - at) - Math.log(o.cap) - 1)))
      : 0;
    const wave = (1 - chaotic) * Math.sin(omega * t + phase) + (chaotic * memory[t]!) / Math.SQRT2;
    x[t] = x[t]! + amplitude * wave;
  }
}

/** Families of troubled histories. */
export const TROUBLE: Readonly<Record<string, (draw: Draw) => OnsetScenario>> = {
  "blow-up": (draw) => {
    const rate = draw.logBetween(0.012, 0.06);
    const sign = draw.sign();
    return troubled(draw, ["blow-up"], rate, (x, at, sd) => {
      const end = Math.min(x.length, Math.round(at + Math.log(1e6) / rate));
      return x.slice(0, end).map((v, t) => v + sign * sd * Math.exp(rate * (t - at)));
    });
  },
  "growing oscillation": (draw) => {
    const rate = draw.logBetween(0.012, 0.06);
    return troubled(draw, ["growing-oscillation"], rate, (x, at, sd) => {
      addOscillation(draw, x, at, { sd, rate, cap: Number.POSITIVE_INFINITY });
      return x.slice(0, Math.min(x.length, Math.round(at + Math.log(1e6) / rate)));
    });
  },
  "growing, saturating": (draw) => {
    const rate = draw.logBetween(0.012, 0.06);
    return troubled(draw, ["growing-oscillation", "wake-breakdown"], rate, (x, at, sd) => {
      addOscillation(draw, x, at, { sd, rate, cap: draw.logBetween(10, 60) });
      return undefined;
    });
  },
  breakdown: (draw) =>
    troubled(draw, ["wake-breakdown"], null, (x, at, sd, phi) => {
      const factor = draw.between(2.5, 6);
      const more = draw.noise(x.length, phi);
      const added = sd * Math.sqrt(factor * factor - 1);
      return x.map((v, t) => (t < at ? v : v + added * more[t]!));
    }),
  "mean step": (draw) =>
    troubled(
      draw,
      ["mean-shift"],
      null,
      (x, at, sd) => {
        const step = draw.sign() * sd * draw.between(5, 12);
        return x.map((v, t) => (t < at ? v : v + step));
      },
      { phi: draw.pick([0, 0.5, 0.8]) },
    ),
  "spike cluster": (draw) =>
    troubled(draw, ["spike-cluster"], null, (x, at, sd, phi) => {
      // Robust scales see the innovations of a correlated signal's block; spikes are measured against the whole noise.
      const size = phi === 0 ? 15 : 20;
      const rate = draw.between(0.06, 0.15);
      const first = at;
      return x.map((v, t) =>
        t === first || (t > at && draw.uniform() < rate)
          ? v + draw.sign() * sd * draw.logBetween(size, 150)
          : v,
      );
    }),
  "non-finite": (draw) => {
    const scenario = troubled(draw, ["non-finite"], null, (x, at) =>
      x.map((v, t) => (t < at ? v : Number.NaN)),
    );
    return scenario;
  },
  "vortex row pairs": (draw) => vortexRow(draw),
  "model breaks down": (draw) => modelBreakdown(draw),
};

const ROW = { vortices: 16, dt: 0.02, steps: 2400, perturbedAt: 600, size: 1e-6 } as const;
const rows = new Map<number, ReturnType<typeof simulateVortexRow>>();

/** The displacement of one vortex of a row that pairs, and that of all, under recording noise. */
function vortexRow(draw: Draw): OnsetScenario {
  const phase = draw.pick([Math.PI, Math.PI / 2]);
  const row = rows.get(phase) ?? simulateVortexRow({ ...ROW, phase });
  rows.set(phase, row);
  const noise = draw.logBetween(1e-5, 1e-3);
  const rate = (ROW.dt * phase * (2 * Math.PI - phase)) / (4 * Math.PI);
  const onset = row.dy.findIndex((v) => Math.abs(v) >= noise);
  const dy = row.dy.map((v) => 0.05 + v + noise * draw.normal());
  const rms = row.rms.map((v) => 0.01 + v + noise * draw.normal());
  return {
    channels: { dy, rms },
    periodsSteps: [],
    plannedSteps: ROW.steps,
    truth: { onset, accepted: ["blow-up", "growing-oscillation", "wake-breakdown"], rate },
  };
}
