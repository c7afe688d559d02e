import type { LiveNight } from "../../api/http/index.ts";
import type { NightEvent, RunName } from "../night/index.ts";
import { formatDuration } from "./format-value.ts";

/** A run in a line of progress. */
export function runWords(run: RunName): string {
  return `run ${run.number} (${run.label})`;
}

/** What is said once about an event; null for those that only move the bars. */
export function eventWords(event: NightEvent): string | null {
  switch (event.kind) {
    case "attempt":
      return `${runWords(event.run)}: attempt ${event.attempt} with remedy ${event.remedy}, because ${event.reason}`;
    case "run-done": {
      const { run } = event;
      return `${runWords(run)}: ${run.verdict} after ${run.steps} of ${run.longestSteps} steps: ${run.reason}`;
    }
    case "notice":
      return event.words;
    default:
      return null;
  }
}

/** How far the night is, and when it will end. */
export function tallyWords(night: LiveNight, now: Date): string {
  const verdicts = Object.entries(night.verdicts).map(([verdict, count]) => `${count} ${verdict}`);
  const done = `${night.done} of ${night.runs} runs done${verdicts.length > 0 ? ` (${verdicts.join(", ")})` : ""}`;
  return [
    done,
    ...endWords("predicted end", night.predictedEndMs, now),
    ...endWords("deadline", night.deadlineMs, now),
  ].join(", ");
}

function endWords(what: string, ms: number | null, now: Date): string[] {
  if (ms === null) return [];
  const left = Math.max(0, (ms - now.getTime()) / 1000);
  return [`${what} ${clockWords(new Date(ms), now)} (in ${formatDuration(left)})`];
}

/** Local clock time, with the date where it is another day. */
export function clockWords(time: Date, now: Date): string {
  const clock = `${two(time.getHours())}:${two(time.getMinutes())}`;
  if (time.toDateString() === now.toDateString()) return clock;
  return `${time.getFullYear()}-${two(time.getMonth() + 1)}-${two(time.getDate())} ${clock}`;
}

function two(n: number): string {
  return String(n).padStart(2, "0");
}
