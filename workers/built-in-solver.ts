import { caseSchema } from "../orchestrator/contract/case-schema.ts";
import { AppError } from "../orchestrator/contract/index.ts";
import { loadKernel } from "./load-kernel.ts";
import { createSimulation, loadDoubts, restoreSimulation } from "./model/index.ts";
import type { PairKernel } from "./model/kernel/index.ts";
import type { CaseInputs, Solver } from "./solver.ts";

/** Bytes of the kernel's name in front of the model's own state. */
const NAME_BYTES = 64;

/**
 * The built-in model as a solver. A run goes on with the kernel that it was begun with, since other arithmetic gives other
 * digits: the kernel's name goes in front of every checkpoint.
 *
 * @returns the solver, and in a sentence which kernel new runs get
 */
export function builtInSolver(): { readonly solver: Solver; readonly notice: string } {
  const newest = loadKernel();
  const kernels = new Map<string, PairKernel>([[newest.kernel.name, newest.kernel]]);
  const kernelNamed = (name: string): PairKernel => {
    const kernel = kernels.get(name) ?? loadKernel({ name }).kernel;
    kernels.set(name, kernel);
    return kernel;
  };
  const withName = (kernel: PairKernel, simulation: ReturnType<typeof createSimulation>) => ({
    channels: simulation.channels,
    periods: simulation.periods,
    dtSeconds: simulation.dtSeconds,
    get stepIndex() {
      return simulation.stepIndex;
    },
    step: () => simulation.step(),
    sample: (out: Float64Array) => simulation.sample(out),
    checkpoint: () => named(kernel.name, simulation.checkpoint()),
  });
  return {
    notice: newest.notice,
    solver: {
      doubts: loadDoubts,
      create: (inputs) => withName(newest.kernel, createSimulation(checkedCase(inputs), newest.kernel)),
      restore: (inputs, checkpoint) => {
        const kernel = kernelNamed(nameOf(checkpoint));
        const state = checkpoint.slice(NAME_BYTES);
        return withName(kernel, restoreSimulation(checkedCase(inputs), kernel, state));
      },
    },
  };
}

function checkedCase(inputs: CaseInputs) {
  const checked = caseSchema.safeParse(inputs);
  if (checked.success) return checked.data;
  const [first] = checked.error.issues;
  throw new AppError("CASE_INVALID", `the case cannot be computed: ${first?.message}`, {
    where: first?.path.join(".") ?? "case",
    fix: "Plan the campaign again with this version of midwatch.",
    cause: checked.error,
  });
}

function named(name: string, state: Uint8Array): Uint8Array {
  const bytes = new Uint8Array(NAME_BYTES + state.length);
  const { read } = new TextEncoder().encodeInto(name, bytes.subarray(0, NAME_BYTES));
  if (read !== name.length) throw new Error(`the kernel name ${name} is longer than ${NAME_BYTES} bytes`);
  bytes.set(state, NAME_BYTES);
  return bytes;
}

function nameOf(checkpoint: Uint8Array): string {
  const bytes = checkpoint.subarray(0, NAME_BYTES);
  const end = bytes.indexOf(0);
  return new TextDecoder().decode(bytes.subarray(0, end < 0 ? NAME_BYTES : end));
}
