// Small processes for tests of the night: real recurrences with seeded noise, no aerodynamics. Nothing but tests loads them.
import { AppError, type ChannelInfo, type Simulation } from "../../orchestrator/contract/index.ts";

/** Inputs of a test process. */
export interface ProcessInputs {
  readonly mean: number;
  /** Coefficient of the first-order autoregression. */
  readonly phi: number;
  readonly noise: number;
  readonly seed: number;
  /** Start-up: an exponential of this size and time constant in steps. */
  readonly startUp?: number;
  readonly startUpSteps?: number;
  /** Step from which an oscillation grows, and its growth a step. */
  readonly growFrom?: number;
  readonly growth?: number;
  /** Drift of the mean a step. */
  readonly drift?: number;
  /** Milliseconds that a step spends computing. */
  readonly stepMs?: number;
  readonly dtSeconds?: number;
  /** What goes wrong, and at which step. */
  readonly trouble?: "throw" | "exit" | "abort" | "memory" | "spin" | "non-finite" | "kill";
  readonly troubleAt?: number;
}

const CHANNELS: readonly ChannelInfo[] = [
  { name: "load", unit: "1", what: "autoregressive process about a mean", role: "load" },
  { name: "other", unit: "N", what: "twice the load and a cosine of eight steps", role: "load" },
  { name: "monitor", unit: "1", what: "noise about one", role: "monitor" },
];

/** Generator with 64-bit state kept as two 32-bit words (Marsaglia's multiply-with-carry). */
class Noise {
  z: number;
  w: number;
  constructor(z: number, w: number) {
    this.z = z >>> 0;
    this.w = w >>> 0;
  }
  uniform(): number {
    this.z = (Math.imul(36969, this.z & 0xffff) + (this.z >>> 16)) >>> 0;
    this.w = (Math.imul(18000, this.w & 0xffff) + (this.w >>> 16)) >>> 0;
    return ((((this.z << 16) + this.w) >>> 0) + 0.5) / 2 ** 32;
  }
  normal(): number {
    return Math.sqrt(-2 * Math.log(this.uniform())) * Math.cos(2 * Math.PI * this.uniform());
  }
}

class ProcessSimulation implements Simulation {
  readonly channels = CHANNELS;
  readonly periods = [];
  readonly dtSeconds: number;
  readonly inputs: ProcessInputs;
  noise: Noise;
  step_ = 0;
  ar = 0;
  monitor = 1;
  ballast: number[][] = [];

  constructor(inputs: ProcessInputs) {
    this.inputs = inputs;
    this.dtSeconds = inputs.dtSeconds ?? 0.01;
    this.noise = new Noise(362436069 ^ Math.imul(inputs.seed, 2654435761), 521288629 + inputs.seed);
    for (let i = 0; i < 32; i++) this.noise.uniform();
  }

  get stepIndex(): number {
    return this.step_;
  }

  step(): void {
    const { inputs } = this;
    if (this.step_ + 1 === inputs.troubleAt) this.trouble();
    const until = performance.now() + (inputs.stepMs ?? 0);
    this.ar = inputs.phi * this.ar + inputs.noise * this.noise.normal();
    this.monitor = 1 + 0.01 * this.noise.normal();
    this.step_ += 1;
    while (performance.now() < until);
  }

  sample(out: Float64Array): void {
    const { inputs, step_: n } = this;
    const startUp = (inputs.startUp ?? 0) * Math.exp(-n / (inputs.startUpSteps ?? 1));
    const late = n - (inputs.growFrom ?? Number.POSITIVE_INFINITY);
    const grown =
      late > 0
        ? inputs.noise * Math.min(1e6, Math.exp((inputs.growth ?? 0.05) * late)) * Math.cos(0.9 * n)
        : 0;
    const load = inputs.mean + this.ar + startUp + (inputs.drift ?? 0) * n + grown;
    out[0] = load;
    out[1] = 2 * load + 0.1 * Math.cos((2 * Math.PI * n) / 8);
    out[2] = this.monitor;
  }

  checkpoint(): Uint8Array {
    const { z, w } = this.noise;
    return new Uint8Array(Float64Array.of(this.step_, this.ar, this.monitor, z, w).buffer);
  }

  trouble(): void {
    const where = { where: `step ${this.step_ + 1}` };
    switch (this.inputs.trouble) {
      case "throw":
        throw new Error("the matrix is singular");
      case "exit":
        process.stderr.write("licence server lost\n");
        process.exit(3);
        break;
      case "abort":
        process.abort();
        break;
      case "kill":
        process.kill(process.pid, "SIGKILL");
        for (;;);
      case "memory":
        for (;;) this.ballast.push(new Array(1e6).fill(this.ballast.length));
      case "spin":
        for (;;);
      case "non-finite":
        throw new AppError("NON_FINITE", "the circulation of strip 3 is NaN", where);
    }
  }
}

function restore(inputs: ProcessInputs, checkpoint: Uint8Array): Simulation {
  const simulation = new ProcessSimulation(inputs);
  const [step, ar, monitor, z, w] = new Float64Array(checkpoint.slice().buffer) as unknown as number[];
  simulation.step_ = step!;
  simulation.ar = ar!;
  simulation.monitor = monitor!;
  simulation.noise = new Noise(z!, w!);
  return simulation;
}

/** Solvers that a child loads when a test names this module. */
export const solvers = new Map([
  [
    "test-process",
    {
      create: (inputs: ProcessInputs): Simulation => new ProcessSimulation(inputs),
      restore,
    },
  ],
]);
