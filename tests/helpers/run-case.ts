import type { z } from "zod";
import { type Case, caseSchema } from "../../orchestrator/contract/case-schema.ts";
import { loadKernel } from "../../workers/load-kernel.ts";
import { createSimulation } from "../../workers/model/index.ts";
import { type PairKernel, typescriptKernel } from "../../workers/model/kernel/index.ts";

/** The kernel in double precision: compiled where the project is built, plain TypeScript else; the bits are the same. */
export const exactKernel: PairKernel = loadKernel({ name: typescriptKernel.name }).kernel;

/** Inputs of a case before defaults are filled in. */
export type CaseInput = z.input<typeof caseSchema>;

/** A wing so small that it does nothing, for rotors on their own. */
export const speckWing = {
  span_m: 0.02,
  root_chord_m: 0.002,
  tip_chord_m: 0.002,
  chordwise_panels: 1,
  spanwise_panels: 2,
};

/** A case with defaults filled in. */
export const caseOf = (input: CaseInput): Case => caseSchema.parse(input);

/** Histories of every channel over some steps, by name. */
export function runCase(
  input: CaseInput,
  steps: number,
  kernel: PairKernel = exactKernel,
): Record<string, Float64Array> {
  const simulation = createSimulation(caseOf(input), kernel);
  const histories = Object.fromEntries(
    simulation.channels.map(({ name }) => [name, new Float64Array(steps)]),
  );
  const sample = new Float64Array(simulation.channels.length);
  for (let i = 0; i < steps; i++) {
    simulation.step();
    simulation.sample(sample);
    simulation.channels.forEach(({ name }, c) => {
      histories[name]![i] = sample[c]!;
    });
  }
  return histories;
}

/** Mean of the last n samples of a channel. */
export function tailMean(histories: Record<string, Float64Array>, channel: string, n: number): number {
  const tail = histories[channel]!.subarray(-n);
  return tail.reduce((sum, x) => sum + x, 0) / tail.length;
}
