import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import type { Timing } from "../timing.ts";

/** Cost of a case in segment–point pairs. */
export interface PairCount {
  readonly nodesAtFullWake: number;
  readonly pairsPerStepAt: (step: number) => number;
  readonly pairsOver: (steps: number) => number;
}

/** Counts the pairs that the kernel evaluates: wakes and bound lattices on wake nodes, wakes on the bodies. */
export function pairCount({ wing, rotors, numerics }: Case, times: Timing): PairCount {
  const wingCols = wing.spanwise_panels + 1;
  const every = numerics.wing_row_every;
  const wingRows = (step: number) =>
    grown(Math.ceil(step / every), times.wingRows, times.wingCutEvery / every, Math.floor(step / every));
  const rotorRows = (step: number) => grown(step, numerics.rotor_wake_rows, numerics.truncate_every, step);
  const wingPoints = 2 * wing.chordwise_panels * wing.spanwise_panels + wing.chordwise_panels * wingCols;
  const sections = rotors.reduce((sum, rotor) => sum + rotor.blades * rotor.sections, 0);
  const bound =
    edges(wing.chordwise_panels + 1, wingCols) +
    rotors.reduce((sum, rotor) => sum + rotor.blades * edges(2, rotor.sections + 1), 0);
  const wakeNodes = (step: number) =>
    wingRows(step) * wingCols +
    rotors.reduce((sum, rotor) => sum + rotor.blades * (rotor.sections + 1) * rotorRows(step), 0);
  const wakeEdges = (step: number) =>
    edges(wingRows(step), wingCols) +
    rotors.reduce((sum, rotor) => sum + rotor.blades * edges(rotorRows(step), rotor.sections + 1), 0);
  const pairsPerStepAt = (step: number) =>
    (wakeEdges(step) + bound) * wakeNodes(step) + (wakeEdges(step) + bound) * (wingPoints + sections);
  const full =
    Math.max(times.wingRows * every, rotors.length > 0 ? numerics.rotor_wake_rows : 0) +
    times.wingCutEvery +
    numerics.truncate_every;
  const pairsOver = (steps: number) => {
    let sum = 0;
    const counted = Math.min(steps, full);
    for (let step = 1; step <= counted; step++) sum += pairsPerStepAt(step);
    return sum + Math.max(0, steps - full) * pairsPerStepAt(full);
  };
  return { nodesAtFullWake: wakeNodes(full), pairsPerStepAt, pairsOver };
}

const edges = (rows: number, cols: number): number => Math.max(0, rows * (cols - 1) + (rows - 1) * cols);

/** Rows after so many were shed: all, or those kept and those since the last cut. */
const grown = (shed: number, kept: number, cutEvery: number, phase: number): number =>
  Math.min(shed, kept + (phase % cutEvery));
