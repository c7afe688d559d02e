import type { Simulation } from "../orchestrator/contract/index.ts";

/** Inputs of a case as the plan wrote them. */
export type CaseInputs = Readonly<Record<string, unknown>>;

/** Makes simulations of one kind. */
export interface Solver {
  /** A simulation before its first step. */
  create(inputs: CaseInputs): Simulation;
  /** A simulation that goes on where the checkpoint was taken. */
  restore(inputs: CaseInputs, checkpoint: Uint8Array): Simulation;
}

/** Solvers by the name that campaigns use. */
export type SolverTable = ReadonlyMap<string, Solver>;
