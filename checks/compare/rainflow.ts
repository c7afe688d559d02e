import { AppError } from "../../orchestrator/contract/index.ts";
import { firstNonFinite } from "../estimators/index.ts";
import { turningPoints } from "./turning-points.ts";

/** One counted cycle, or half of one. */
interface LoadCycle {
  readonly range: number;
  readonly mean: number;
  readonly count: 0.5 | 1;
}

/** The cycles of a history, with what was done to those that do not close. */
export interface CycleCount {
  readonly cycles: readonly LoadCycle[];
  /** Sum of the counts. */
  readonly total: number;
  readonly residue: "half cycles" | "repeating";
}

/**
 * Rainflow cycles of a load history.
 *
 * Three points in a row, range Y before range X: Y is counted when X >= Y, as a half cycle where Y holds the first point of
 * what is left, else as a whole one. What does not close (the residue):
 *
 * - `half cycles`, the rule of section 5.4.4: every range that is left counts half. For a window out of a longer history.
 * - `repeating`, section 5.4.5: the history is taken to repeat for ever and starts at its largest modulus; all cycles close.
 *
 * Limits: `half cycles` undercounts the largest range of a history that does repeat by up to half a cycle; `repeating` joins
 * the end to the beginning, which a window cut at other points of a slow period does not justify.
 *
 * @param x shape [n], n >= 0, finite, the accepted window and not the start-up before it
 * @returns ranges > 0; no cycles for fewer than two different values
 * @throws NON_FINITE with the index
 * @see ASTM E1049-85, sections 5.4.4 and 5.4.5 (from memory)
 */
export function rainflow(x: Float64Array, residue: CycleCount["residue"] = "half cycles"): CycleCount {
  const bad = firstNonFinite(x);
  if (bad !== null)
    throw new AppError("NON_FINITE", `sample ${bad} is ${x[bad]}: no cycles can be counted`, {
      fix: "count cycles of an accepted window",
    });
  const points = turningPoints(x);
  const repeats = residue === "repeating";
  const cycles = countCycles(repeats ? rotated(points) : points, repeats);
  return { cycles, total: cycles.reduce((sum, cycle) => sum + cycle.count, 0), residue };
}

function countCycles(points: Float64Array, closes: boolean): LoadCycle[] {
  const cycles: LoadCycle[] = [];
  // A stack of points whose first one is at `start`; taken-off points leave no gap.
  const stack = new Float64Array(points.length);
  let start = 0;
  let top = 0;
  for (let i = 0; i < points.length; i++) {
    stack[top++] = points[i]!;
    while (top - start >= 3) {
      const y = Math.abs(stack[top - 2]! - stack[top - 3]!);
      if (Math.abs(stack[top - 1]! - stack[top - 2]!) < y) break;
      if (top - start === 3 && !closes) {
        cycles.push(cycleOf(stack[start]!, stack[start + 1]!, 0.5));
        start += 1;
      } else {
        cycles.push(cycleOf(stack[top - 3]!, stack[top - 2]!, 1));
        stack[top - 3] = stack[top - 1]!;
        top -= 2;
      }
    }
  }
  for (let i = start + 1; i < top; i++) cycles.push(cycleOf(stack[i - 1]!, stack[i]!, 0.5));
  return cycles;
}

function cycleOf(a: number, b: number, count: 0.5 | 1): LoadCycle {
  return { range: Math.abs(a - b), mean: a + (b - a) / 2, count };
}

/** The same history begun at its largest modulus, and ended there: nothing is then left open. */
function rotated(points: Float64Array): Float64Array {
  if (points.length < 2) return points;
  let at = 0;
  for (let i = 1; i < points.length; i++) if (Math.abs(points[i]!) > Math.abs(points[at]!)) at = i;
  const round = new Float64Array(points.length + 1);
  for (let i = 0; i <= points.length; i++) round[i] = points[(at + i) % points.length]!;
  return turningPoints(round);
}
