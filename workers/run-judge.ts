import type { HistoryJudgement, HistorySamples } from "../orchestrator/contract/index.ts";

/** What a judge says of a record. */
export interface Finding {
  readonly judgement: HistoryJudgement;
  /** Whether every demanded channel is accepted and the shortest run is reached. */
  readonly accepted: boolean;
}

/**
 * Judges one attempt while it grows, by one campaign's rules. All that it says depends on the samples alone, in their
 * order, and not on how the run is cut into legs.
 */
export interface RunJudge {
  /** Takes the next sample; true when a monitor speaks up. */
  push(values: Float64Array): boolean;
  /** First step after `step` at which the averages are looked at. */
  nextLook(step: number): number;
  /** Looks at the averages of the record so far. */
  look(samples: HistorySamples): Finding;
  /** Judges the record after a monitor spoke up: where the onset lies, and whether what precedes it will do. */
  afterAlarm(samples: HistorySamples): Finding;
  /** Judges the record after the solver met a value that is no number at the step after the last. */
  afterNonFinite(samples: HistorySamples, words: string): Finding;
  /** Judges the whole record for good. */
  atTheEnd(samples: HistorySamples): Finding;
}
