/** Every verdict, best first: what may be done with a run, or with one channel of it. */
export const VERDICTS = ["accepted", "needs-longer", "drifting", "unstable", "failed"] as const;

/** What may be done with a run; only `accepted` hands out loads unasked. */
export type Verdict = (typeof VERDICTS)[number];
