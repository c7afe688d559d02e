import type { ChannelInfo, DeclaredPeriod, PlannedRun } from "../contract/index.ts";
import type { Inputs } from "./field-path.ts";

/** What the solver says of a case before it is run. */
export interface CaseDescription {
  readonly dtSeconds: number;
  readonly stepsPerRevolution: number;
  readonly periods: readonly DeclaredPeriod[];
  readonly channels: readonly ChannelInfo[];
  /** Step at which the kept wake can have returned to the wing on a closed path; null where it cannot. */
  readonly wakeReturnSteps: number | null;
  /** Segment–point pairs of a whole run of so many steps, growth of the wake included. */
  readonly pairsOver: (steps: number) => number;
  readonly warnings: PlannedRun["warnings"];
}

/** Describes a complete case; may throw CASE_INVALID where the inputs contradict each other. */
export type DescribeCase = (inputs: Inputs) => CaseDescription;
