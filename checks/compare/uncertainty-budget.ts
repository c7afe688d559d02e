import { AppError } from "../../orchestrator/contract/index.ts";
import { numberInWords } from "../mean/amount-in-words.ts";
import type { Estimate } from "./estimate.ts";

/** One examined source of error that all samples of a run share. */
export interface BudgetInput {
  /** What was varied: wake length, step, strips. */
  readonly source: string;
  /** How its size is known. */
  readonly from: "companion difference" | "grid convergence index" | "not examined";
  /** Companion less run, with its sign, or the index; null where not examined. */
  readonly amount: number | null;
  /** Half-width of that difference: a comparison tells nothing finer. */
  readonly resolvedTo?: number | null | undefined;
}

/** One line of the budget. */
interface BudgetEntry {
  readonly label: string;
  readonly kind: "statistical" | "systematic";
  /** What enters the total; null where not known. */
  readonly amount: number | null;
  /** The difference with its sign, where one was measured. */
  readonly signed: number | null;
  readonly words: string;
}

/** What is uncertain in one load, line by line, with a total. */
export interface UncertaintyBudget {
  readonly entries: readonly BudgetEntry[];
  /** Sum of what is known. */
  readonly total: number;
  /** False where a source was not examined: the total is then a lower limit. */
  readonly complete: boolean;
  readonly words: string;
}

/**
 * Uncertainty budget of a load: statistical half-width, truncation of the wake, step, strips, each on a line of its own.
 *
 *   total = half-width + Σ max(|amount|, resolvedTo)
 *
 * The lines are added, not combined as squares: companion differences and convergence indices estimate errors that are the
 * same in every sample, that may have the same sign, and that are no random draws. A difference smaller than what its
 * comparison resolves counts as what it resolves.
 *
 * Limits: the total is no confidence interval. A companion difference is the effect of one stated change (a wake half as
 * long again), not the whole effect of the cut. Errors of the model itself are in no line.
 *
 * @throws USAGE for amounts that are not finite, or given where nothing was examined
 */
export function uncertaintyBudget(load: Estimate, inputs: readonly BudgetInput[]): UncertaintyBudget {
  const statistical: BudgetEntry = {
    label: "statistical",
    kind: "statistical",
    amount: finite(load.halfWidth, "half-width"),
    signed: null,
    words: load.isBound
      ? "bound of a record that has come to rest"
      : `half-width of the mean at ${Number((100 * load.confidence).toPrecision(6))} %`,
  };
  const entries = [statistical, ...inputs.map(entryOf)];
  const total = entries.reduce((sum, entry) => sum + (entry.amount ?? 0), 0);
  const unknown = entries.filter((entry) => entry.amount === null).map((entry) => entry.label);
  const complete = unknown.length === 0;
  const rule = "the lines added, since shared errors don't average out; no confidence interval";
  const words = complete
    ? `±${numberInWords(total)}: ${rule}`
    : `at least ±${numberInWords(total)}: ${unknown.join(" and ")} not examined; ${rule}`;
  return { entries, total, complete, words };
}

function entryOf({ source, from, amount, resolvedTo }: BudgetInput): BudgetEntry {
  if ((amount === null) !== (from === "not examined"))
    throw new AppError("USAGE", `${source} is given as ${amount}, but ${from}`, {
      fix: "give an amount exactly where the source was examined",
    });
  if (amount === null)
    return { label: source, kind: "systematic", amount: null, signed: null, words: "not examined" };
  const size = Math.abs(finite(amount, source));
  const fine = finite(resolvedTo ?? 0, `resolution of ${source}`);
  const coarse = fine > size ? `, not told from none: the comparison resolves ${numberInWords(fine)}` : "";
  return {
    label: source,
    kind: "systematic",
    amount: Math.max(size, fine),
    signed: from === "companion difference" ? amount : null,
    words: `${from}${coarse}`,
  };
}

function finite(value: number, what: string): number {
  if (!Number.isFinite(value))
    throw new AppError("USAGE", `${what} is ${value}`, { fix: "leave out what has no usable value" });
  return value;
}
