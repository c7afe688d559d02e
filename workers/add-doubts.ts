import type { ChannelJudgement, HistoryJudgement } from "../orchestrator/contract/index.ts";
import type { Solver } from "./solver.ts";

/**
 * Adds what the solver doubts about its own averages: a warning with the channel, the sentence among the notes.
 *
 * @returns the judgement itself where there is nothing to doubt
 */
export function addDoubts(judgement: HistoryJudgement, doubtsOf: Solver["doubts"]): HistoryJudgement {
  const means = Object.entries(judgement.channels).flatMap(([name, { mean }]) =>
    mean === null ? [] : [[name, mean] as const],
  );
  const doubts = doubtsOf?.(Object.fromEntries(means)) ?? [];
  if (doubts.length === 0) return judgement;
  const channels: Record<string, ChannelJudgement> = { ...judgement.channels };
  for (const { code, field } of doubts) {
    const channel = channels[field];
    if (channel !== undefined) channels[field] = { ...channel, warnings: [...channel.warnings, code] };
  }
  return { ...judgement, notes: [...judgement.notes, ...doubts.map(({ words }) => words)], channels };
}
