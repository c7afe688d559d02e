import { loadKernel } from "../../workers/load-kernel.ts";
import { describeCase, MODEL_VERSION } from "../../workers/model/index.ts";
import type { Case } from "../contract/case-schema.ts";
import type { PlanningOptions } from "../planning/index.ts";
import { measureSpeed } from "./measure-speed.ts";

/** What planning needs of a solver, and how fast it is here. */
export interface PlannedSolver extends Pick<PlanningOptions, "describe" | "modelVersion"> {
  /** Measures pairs a second on one core; takes a tenth of a second. */
  readonly speed: () => number;
}

/** The built-in model with the kernel that this machine runs it with. */
export function loadBuiltInSolver(): PlannedSolver {
  const { kernel } = loadKernel();
  return {
    // Planning hands over inputs that have passed the case's schema.
    describe: (inputs) => describeCase(inputs as Case),
    // Kernels of another name give other bits, and so another run.
    modelVersion: `${MODEL_VERSION} ${kernel.name}`,
    speed: () => measureSpeed(kernel),
  };
}
