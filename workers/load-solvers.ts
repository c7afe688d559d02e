import { builtInSolver } from "./built-in-solver.ts";
import type { Solver, SolverTable } from "./solver.ts";

/**
 * The solvers of this machine. Campaigns name one of them; nothing in a campaign adds to the table.
 *
 * @param extra URL of a module that exports `solvers: SolverTable`, for tests; null otherwise
 * @returns the table, and in a sentence how fast the built-in model will be
 */
export async function loadSolvers(
  extra: string | null,
): Promise<{ solvers: SolverTable; notice: string | null }> {
  const builtIn = builtInSolver();
  const solvers = new Map<string, Solver>([["built-in", builtIn.solver]]);
  if (extra !== null) {
    const module = (await import(extra)) as { readonly solvers: SolverTable };
    for (const [name, solver] of module.solvers) solvers.set(name, solver);
  }
  return { solvers, notice: `kernel: ${builtIn.notice}` };
}
