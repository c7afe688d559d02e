import type { Case } from "../../orchestrator/contract/case-schema.ts";
import type { Simulation } from "../../orchestrator/contract/index.ts";
import { describeCase } from "./describe/describe-case.ts";
import type { PairKernel } from "./kernel/index.ts";
import { takeSample } from "./record/take-sample.ts";
import { createWakeMonitors } from "./record/wake-monitors.ts";
import { loadState, saveState } from "./state/checkpoint.ts";
import { march } from "./state/march.ts";
import { createState, type ModelState } from "./state/model-state.ts";

/** Version of the model's numbers: part of a run's identity. Change it with anything that changes a history. */
export const MODEL_VERSION = "lifting-surface-free-wake/1";

/**
 * A simulation of a case before its first step.
 *
 * @param kernel its name is part of the run's identity
 * @throws CASE_INVALID where the inputs contradict each other
 */
export function createSimulation(inputs: Case, kernel: PairKernel): Simulation {
  return simulationOf(inputs, kernel, null);
}

/**
 * A simulation that goes on where the checkpoint was taken, bit-identically on the same machine and Node.
 *
 * @throws CASE_INVALID as createSimulation; CHECKPOINT_DAMAGED where the checkpoint is damaged or of another case, version or
 *   kernel
 */
export function restoreSimulation(inputs: Case, kernel: PairKernel, checkpoint: Uint8Array): Simulation {
  return simulationOf(inputs, kernel, checkpoint);
}

function simulationOf(inputs: Case, kernel: PairKernel, checkpoint: Uint8Array | null): Simulation {
  const { channels, periods, dtSeconds } = describeCase(inputs);
  const state: ModelState = createState(inputs);
  const last = new Float64Array(channels.length);
  const room = createWakeMonitors();
  const identity = JSON.stringify([MODEL_VERSION, kernel.name, inputs]);
  if (checkpoint !== null) loadState(state, last, checkpoint, identity);
  return {
    channels,
    periods,
    dtSeconds,
    get stepIndex() {
      return state.step;
    },
    step() {
      march(state, kernel);
      takeSample(state, room, last);
    },
    sample(out) {
      out.set(last);
    },
    checkpoint: () => saveState(state, last, identity),
  };
}
