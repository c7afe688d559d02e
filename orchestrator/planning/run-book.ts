import type { PlannedRun, RunRole } from "../contract/index.ts";
import { AppError } from "../contract/index.ts";
import type { AxisValue, ResolvedAxis } from "./axis-values.ts";
import { type Inputs, matchFieldPath, parseFieldPath } from "./field-path.ts";
import type { RunDraft } from "./run-draft.ts";
import { canonicalJson, type RunIdentity, runId } from "./run-id.ts";

/** A run of the plan while it is being made. */
export interface BookedRun {
  readonly runId: string;
  readonly role: RunRole;
  readonly draft: RunDraft;
  readonly inputs: Inputs;
  varied: Readonly<Record<string, AxisValue | null>>;
  baselineRunId: string | null;
  companionOf: PlannedRun["companionOf"];
  /** Steps of this run for each step of the campaign's other runs: lengths given in steps are stretched by it. */
  stepScale: number;
}

/** Runs by content: drafts that come out equal are one run. */
export class RunBook {
  readonly #runs = new Map<string, BookedRun>();
  readonly #solver: Pick<RunIdentity, "solver" | "modelVersion">;
  readonly #idOf: (identity: RunIdentity) => string;

  constructor(
    solver: Pick<RunIdentity, "solver" | "modelVersion">,
    idOf: (identity: RunIdentity) => string = runId,
  ) {
    this.#solver = solver;
    this.#idOf = idOf;
  }

  /** Every run, in the order in which they came. */
  get runs(): readonly BookedRun[] {
    return [...this.#runs.values()];
  }

  /**
   * Enters a draft with its checked inputs; where the same case is there already, that run is returned and nothing added.
   *
   * @throws BUG where two different cases come to the same run id
   */
  enter(draft: RunDraft, inputs: Inputs): { readonly run: BookedRun; readonly isNew: boolean } {
    const id = this.#idOf({ ...this.#solver, inputs });
    const there = this.#runs.get(id);
    if (there !== undefined) {
      if (canonicalJson(there.inputs) !== canonicalJson(inputs))
        throw new AppError("BUG", `two different cases come to the same run id ${id}`, {
          fix: "Change any input of one of them by a hair (a note does not count), and plan again.",
        });
      return { run: there, isNew: false };
    }
    const run = {
      runId: id,
      role: draft.role,
      draft,
      inputs,
      varied: draft.varied,
      baselineRunId: null,
      companionOf: null,
      stepScale: 1,
    };
    this.#runs.set(id, run);
    return { run, isNew: true };
  }
}

/** Values of the axes that a baseline shares with every run compared with it; null where they differ or do not apply. */
export function sharedValues(
  baseline: BookedRun,
  compared: readonly BookedRun[],
  axes: readonly ResolvedAxis[],
): BookedRun["varied"] {
  const shared: Record<string, AxisValue | null> = {};
  for (const axis of axes) {
    const values = new Set(compared.map((run) => run.varied[axis.name] ?? null));
    const [only = null] = values;
    const applies = axis.fields.some(
      (field) => matchFieldPath(baseline.inputs, parseFieldPath(field)).length > 0,
    );
    shared[axis.name] = applies && values.size === 1 ? only : null;
  }
  return shared;
}

/** Short words that tell a run from its siblings: its name and the values of the axes that apply to it. */
export function labelOf(run: BookedRun): string {
  const values = Object.entries(run.draft.words).flatMap(([axis, words]) =>
    run.varied[axis] == null ? [] : [words],
  );
  const named = run.draft.name === null ? [] : [run.draft.name];
  const parts = run.role === "sweep" ? [...values, ...named] : [...named, ...values];
  return parts.join(" · ") || "base case";
}
