import { numberInWords } from "../mean/amount-in-words.ts";
import { meanInWords } from "./mean-in-words.ts";
import type { RefinementStudy } from "./refinement-study.ts";

/** The study in sentences: what the levels do, what follows, and what is not known. */
export function refinementWords(
  study: Omit<RefinementStudy, "words">,
  formalOrder: number | undefined,
): string {
  const statistical = `statistical half-width ${numberInWords(study.statistical)} apart from it`;
  switch (study.kind) {
    case "within-noise":
      return `no order can be observed: ${noisyChanges(study)}; longer runs, or levels further apart, would show one`;
    case "unchanged":
      return `the finest two levels give the same value: nothing to extrapolate; ${statistical}`;
    case "divergent":
      return `the levels run apart: each refinement changes the value by as much or more (${changesInWords(study)}); the finest value has no error estimate`;
    case "oscillatory-divergent":
      return `the levels swing apart: the changes alternate and grow (${changesInWords(study)}); the finest value has no error estimate`;
    case "two-levels":
      if (study.discretisation === null)
        return `two levels differ by ${changesInWords(study)}; without a third level or a formal order nothing follows from it`;
      return `order ${formalOrder} assumed, not observed, with two levels: discretisation ±${numberInWords(study.discretisation)} (factor of safety 3), ${statistical}`;
    default:
      return `${study.kind} convergence of order ${orderInWords(study)}: towards ${meanInWords(study.extrapolated!.mean, study.discretisation!)}, discretisation ±${numberInWords(study.discretisation!)}, ${statistical}${alternating(study)}`;
  }
}

function orderInWords({ order, orderRange, orderUsed }: Omit<RefinementStudy, "words">): string {
  const [low, high] = orderRange!;
  const range =
    low === high
      ? ""
      : ` (${low === null ? "no lower end" : numberInWords(low)} to ${high === null ? "no upper end" : numberInWords(high)} within the half-widths)`;
  const capped =
    orderUsed === order ? "" : `, more than the formal order, of which ${numberInWords(orderUsed!)} is used`;
  return `${numberInWords(order!)}${range}${capped}`;
}

function alternating({ kind }: Omit<RefinementStudy, "words">): string {
  return kind === "oscillatory"
    ? "; the values alternate, so that order and index are figures of the procedure only"
    : "";
}

function noisyChanges({ changes }: Omit<RefinementStudy, "words">): string {
  return changes
    .slice(0, 2)
    .filter(({ told }) => !told)
    .map(
      ({ from, to, change, halfWidth }) =>
        `from ${from} to ${to} the value changes by ${numberInWords(-change)}, within its statistical half-width of ${numberInWords(halfWidth)}`,
    )
    .join(", and ");
}

function changesInWords({ changes }: Omit<RefinementStudy, "words">): string {
  return changes
    .slice(0, 2)
    .map(({ from, to, change }) => `${numberInWords(-change)} from ${from} to ${to}`)
    .join(", ");
}
