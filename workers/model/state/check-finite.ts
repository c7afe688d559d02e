import { AppError } from "../../../orchestrator/contract/index.ts";
import type { ModelState } from "./model-state.ts";

/**
 * Holds circulations and wake velocities, from which everything else follows, to be numbers.
 *
 * @throws NON_FINITE naming quantity and step
 */
export function checkFinite(state: ModelState): void {
  const { wing, problem, nodeVelocities, nodePoints } = state;
  const ring = firstBad(wing.circulation, wing.panels);
  if (ring >= 0) throw nonFinite(state, `the circulation of strip ${(ring % wing.geometry.strips) + 1}`);
  const section = firstBad(problem.circulation, problem.circulation.length);
  if (section >= 0) throw nonFinite(state, `the circulation of blade section ${section + 1}`);
  for (const component of [nodeVelocities.u, nodeVelocities.v, nodeVelocities.w]) {
    const node = firstBad(component, nodePoints.n);
    if (node >= 0) throw nonFinite(state, `the velocity of wake node ${node + 1}`);
  }
}

function firstBad(values: Float64Array, n: number): number {
  for (let i = 0; i < n; i++) if (!Number.isFinite(values[i]!)) return i;
  return -1;
}

const nonFinite = ({ step }: ModelState, quantity: string): AppError =>
  new AppError("NON_FINITE", `${quantity} is not a number at step ${step}`, {
    where: `step ${step}`,
    fix: "Use thicker vortex cores or a smaller time step.",
  });
