import type { RunRole } from "../contract/index.ts";
import type { AxisValue } from "./axis-values.ts";
import { type FieldStep, type Inputs, parseFieldPath } from "./field-path.ts";

/** Changes that made a run's inputs, with the place in the campaign file that states them. */
export interface AppliedChanges {
  readonly changes: Inputs;
  readonly at: readonly (string | number)[];
  /** True where the field's own name stands below `at` in the file. */
  readonly keyed: boolean;
}

/** A run before its inputs are checked: the base case with changes applied in order. */
export interface RunDraft {
  readonly role: RunRole;
  /** What the run is called beside or instead of the values of its axes: a variant, a single case. */
  readonly name: string | null;
  readonly varied: Readonly<Record<string, AxisValue | null>>;
  /** Values of the axes as they are printed, by axis name. */
  readonly words: Readonly<Record<string, string>>;
  readonly trail: readonly AppliedChanges[];
  /** Place in the sweep's unit cube; null outside the sweep. */
  readonly position: readonly number[] | null;
}

/** Place in the campaign file of a field of a draft's case: the last change that set it, else the base case. */
export function originOf(draft: RunDraft, path: readonly (string | number)[]): readonly (string | number)[] {
  for (const { changes, at, keyed } of draft.trail.toReversed())
    for (const key of Object.keys(changes).toReversed()) {
      const steps = parseFieldPath(key);
      if (!reaches(steps, path)) continue;
      return keyed ? [...at, "set", key, ...path.slice(steps.length)] : at;
    }
  return ["case", ...path];
}

/** Whether a change to `steps` sets the field at `path`, or something inside it. */
function reaches(steps: readonly FieldStep[], path: readonly (string | number)[]): boolean {
  const shared = Math.min(steps.length, path.length);
  if (shared === 0) return false;
  return steps
    .slice(0, shared)
    .every((step, i) => step === path[i] || (step === "*" && typeof path[i] === "number"));
}
