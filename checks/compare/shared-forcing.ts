import type { DeclaredPeriod } from "../../orchestrator/contract/index.ts";

/** What drives a run from outside, as far as a sample-by-sample difference cares. */
export interface Forcing {
  readonly dtSeconds: number;
  /** Time of the first sample. */
  readonly startSeconds: number;
  /** Text that is equal for two runs exactly if path and wind are the same. */
  readonly drive: string;
  readonly periods: readonly DeclaredPeriod[];
}

/** Whether two runs share their forcing; if so with all periods that their difference carries. */
export type SharedForcing =
  | { readonly shared: true; readonly periods: readonly DeclaredPeriod[]; readonly words: string }
  | { readonly shared: false; readonly words: string };

/**
 * Whether two histories may be differenced sample by sample: same step, start, path and wind, and no declared period that
 * both carry with different lengths.
 *
 * A period that only one of them carries (blade passing against a baseline without rotors) is no obstacle: it is a period
 * of the difference too. Two lengths of the same period (another tip-speed ratio) are one: the difference would beat.
 */
export function sharedForcing(a: Forcing, b: Forcing): SharedForcing {
  const no = (words: string): SharedForcing => ({ shared: false, words });
  if (!close(a.dtSeconds, b.dtSeconds))
    return no(`the time steps differ: ${a.dtSeconds} s and ${b.dtSeconds} s`);
  if (Math.abs(a.startSeconds - b.startSeconds) > 1e-6 * a.dtSeconds)
    return no(`they start at different times: ${a.startSeconds} s and ${b.startSeconds} s`);
  if (a.drive !== b.drive) return no("path or wind differ");
  for (const period of a.periods) {
    const other = b.periods.find(({ name }) => name === period.name);
    if (other !== undefined && !close(period.steps, other.steps))
      return no(`the period of ${period.name} differs: ${period.steps} and ${other.steps} steps`);
  }
  const more = b.periods.filter(({ name }) => a.periods.every((period) => period.name !== name));
  return {
    shared: true,
    periods: [...a.periods, ...more],
    words: "step, start, path and wind are the same, and no period has two lengths",
  };
}

function close(a: number, b: number): boolean {
  return Math.abs(a - b) <= 1e-9 * Math.max(Math.abs(a), Math.abs(b));
}
