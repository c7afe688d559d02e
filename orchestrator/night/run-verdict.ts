import { type AcceptRule, type HistoryJudgement, VERDICTS, type Verdict } from "../contract/index.ts";

/** A verdict with the channel that decided it and why. */
export interface RunVerdict {
  readonly verdict: Verdict;
  readonly words: string;
}

/**
 * The verdict of a run by its averages: that of the worst demanded channel, the first one of them in the campaign's order.
 * A channel that the run does not record is not demanded of it.
 */
export function runVerdict(judgement: HistoryJudgement | null, accept: AcceptRule): RunVerdict {
  const judged = accept.channels.flatMap(({ name }) => {
    const channel = judgement?.channels[name];
    return channel === undefined ? [] : [{ name, verdict: channel.verdict, words: channel.words }];
  });
  const [first, ...others] = judged;
  if (first === undefined) return { verdict: "needs-longer", words: "too short to be judged" };
  const rank = (verdict: Verdict) => VERDICTS.indexOf(verdict);
  const worst = others.reduce((a, b) => (rank(b.verdict) > rank(a.verdict) ? b : a), first);
  if (worst.verdict === "accepted")
    return { verdict: "accepted", words: "every demanded channel is accepted" };
  return { verdict: worst.verdict, words: `${worst.name}: ${worst.words}` };
}
