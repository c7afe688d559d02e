import type { Simulation } from "../orchestrator/contract/index.ts";

/** Inputs of a case as the plan wrote them. */
export type CaseInputs = Readonly<Record<string, unknown>>;

/** Something that a solver holds against one of its own averages. */
interface SolverDoubt {
  readonly code: string;
  readonly field: string;
  readonly words: string;
}

/** Makes simulations of one kind. */
export interface Solver {
  /** A simulation before its first step. */
  create(inputs: CaseInputs): Simulation;
  /** A simulation that goes on where the checkpoint was taken. */
  restore(inputs: CaseInputs, checkpoint: Uint8Array): Simulation;
  /** What averages say against themselves, by channel: loads beyond the reach of the solver's method. */
  doubts?(means: Readonly<Record<string, number>>): readonly SolverDoubt[];
}

/** Solvers by the name that campaigns use. */
export type SolverTable = ReadonlyMap<string, Solver>;
