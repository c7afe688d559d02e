import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import type { Timing } from "../timing.ts";

/** Cost of a case in nodes of its wakes and in segment–point pairs; steps count from 1. */
export interface PairCount {
  readonly nodesAt: (step: number) => number;
  /** Largest number of nodes that the wakes ever have. */
  readonly nodesAtFullWake: number;
  readonly pairsPerStepAt: (step: number) => number;
  readonly pairsOver: (steps: number) => number;
}

/** Counts the pairs that the kernel evaluates: wakes and bound lattices on wake nodes, and on the bodies. */
export function pairCount({ wing, rotors, numerics }: Case, times: Timing): PairCount {
  const wingCols = wing.spanwise_panels + 1;
  const every = numerics.wing_row_every;
  const wingRows = rowsAt({
    shed: (step) => Math.ceil(step / every),
    kept: times.wingRows,
    cutEvery: times.wingCutEvery,
  });
  const bladeRows = rowsAt({
    shed: (step) => step,
    kept: numerics.rotor_wake_rows,
    cutEvery: numerics.truncate_every,
  });
  const overBlades = (ofBlade: (cols: number) => number) =>
    rotors.reduce((sum, rotor) => sum + rotor.blades * ofBlade(rotor.sections + 1), 0);
  const wingPoints = 2 * wing.chordwise_panels * wing.spanwise_panels + wing.chordwise_panels * wingCols;
  const bodyPoints = wingPoints + overBlades((cols) => cols - 1);
  const bound = edges(wing.chordwise_panels + 1, wingCols) + overBlades((cols) => edges(2, cols));
  const nodesAt = (step: number) => {
    const rows = bladeRows(step);
    return wingRows(step) * wingCols + overBlades((cols) => rows * cols);
  };
  const pairsPerStepAt = (step: number) => {
    const rows = bladeRows(step);
    const free = edges(wingRows(step), wingCols) + overBlades((cols) => edges(rows, cols));
    return (free + bound) * nodesAt(step) + free * bodyPoints + bound * wingPoints;
  };
  // From `full` on everything repeats with the cuts of the wing's wake, of which those of the rotors' are a part.
  const cycle = times.wingCutEvery;
  const slowest = Math.max(times.wingRows * every, rotors.length > 0 ? numerics.rotor_wake_rows : 0);
  const full = cycle * Math.ceil(slowest / cycle);
  const sum = (from: number, to: number) => {
    let pairs = 0;
    for (let step = from; step < to; step++) pairs += pairsPerStepAt(step);
    return pairs;
  };
  return {
    nodesAt,
    nodesAtFullWake: Math.max(...Array.from({ length: cycle }, (_, i) => nodesAt(full + i))),
    pairsPerStepAt,
    pairsOver: (steps) =>
      steps < full
        ? sum(1, steps + 1)
        : sum(1, full) + ((steps - full + 1) / cycle) * sum(full, full + cycle),
  };
}

const edges = (rows: number, cols: number): number => Math.max(0, rows * (cols - 1) + (rows - 1) * cols);

/** Rows at a step: those that the last cut left, and those shed since. */
const rowsAt =
  (wake: { shed: (step: number) => number; kept: number; cutEvery: number }) =>
  (step: number): number => {
    const cut = step - (step % wake.cutEvery);
    return Math.min(wake.shed(cut), wake.kept) + wake.shed(step) - wake.shed(cut);
  };
