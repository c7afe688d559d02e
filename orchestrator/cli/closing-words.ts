import { CAUTION } from "../contract/index.ts";
import type { NightEnd, NightSummary } from "../night/index.ts";
import { formatDuration } from "./format-value.ts";

const ENDS: Readonly<Record<NightEnd, string>> = {
  "all-done": "Every run is done",
  deadline: "The deadline is reached; what was not finished is checkpointed",
  stopped: "Stopped; what was not finished is checkpointed",
  "disk-full": "The disk is full; what was committed is safe",
  damaged: "Stopped because stored files are damaged",
};

/** What a night came to, below the table of its runs. */
export function closingWords(summary: NightSummary, shownFolder: string): string {
  const { campaign, runs, done, verdicts } = summary;
  const counts = Object.entries(verdicts).map(([verdict, count]) => `${count} ${verdict}`);
  const wall = formatDuration((summary.endedMs - summary.startedMs) / 1000);
  const goOn = summary.endedBy === "all-done" ? [] : ["Launch the same file again to go on from here."];
  return [
    `${ENDS[summary.endedBy]}: ${done} of ${runs} runs done${counts.length === 0 ? "" : ` (${counts.join(", ")})`} after ${wall}.`,
    `Compute: ${formatDuration(summary.computeSeconds)} spent, ${formatDuration(summary.savedSeconds)} saved by ending runs early.`,
    ...goOn,
    `Results lie in ${shownFolder}: midwatch loads ${campaign} hands out the loads, midwatch history RUN a time history.`,
    CAUTION,
  ].join("\n");
}
