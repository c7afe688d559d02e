import type { ChannelJudgement, Verdict } from "../../orchestrator/contract/index.ts";
import { numberInWords } from "../mean/amount-in-words.ts";
import { meanInWords } from "./mean-in-words.ts";
import type { RatioInterval } from "./ratio-interval.ts";

/**
 * How a difference was formed: the two histories subtracted and judged as one channel; two independent means with the
 * root sum of squares; or two means whose correlation is not known, with the sum of the half-widths.
 */
type DifferenceWay = "sample by sample" | "independent" | "worst case";

/** A load's difference from its baseline, run less baseline. */
export interface Difference {
  readonly way: DifferenceWay;
  /** Why this way, in words. */
  readonly because: string;
  readonly verdict: Verdict;
  readonly mean: number | null;
  readonly halfWidth: number | null;
  readonly confidence: number;
  /** In percent of the baseline's mean; null where the baseline gives no percentage, and the words say why. */
  readonly percent: { readonly value: number; readonly low: number; readonly high: number } | null;
  /** The judgement of the difference as a channel of its own; null for the other ways. */
  readonly judgement: ChannelJudgement | null;
  /** Difference of the two loads that were handed out, for comparison: their windows may differ from the difference's. */
  readonly differenceOfMeans: number | null;
  readonly words: string;
}

/** A ratio of difference to baseline as a percentage. */
export function asPercent(interval: RatioInterval | null): Difference["percent"] {
  if (interval === null) return null;
  return { value: 100 * interval.ratio, low: 100 * interval.low, high: 100 * interval.high };
}

/** The difference in a sentence. */
export function differenceWords(found: Omit<Difference, "words">): string {
  if (found.mean === null || found.halfWidth === null)
    return `no difference can be given (${found.way}: ${found.because})`;
  const unusable = found.verdict === "accepted" ? "" : `${found.verdict}, not to be used: `;
  const share =
    found.percent === null
      ? "no percentage, because the baseline is not told from zero"
      : `${signed(found.percent.value)} % of the baseline (${signed(found.percent.low)} to ${signed(found.percent.high)} %)`;
  const zero =
    Math.abs(found.mean) <= found.halfWidth ? "; not told from no difference at this confidence" : "";
  return `${unusable}${found.mean > 0 ? "+" : ""}${meanInWords(found.mean, found.halfWidth)} ± ${numberInWords(found.halfWidth)}, ${share}; ${found.way}, because ${found.because}${zero}`;
}

function signed(value: number): string {
  return value > 0 ? `+${numberInWords(value)}` : numberInWords(value).replace("-", "−");
}
