/** When a night ends: a clock time, or a duration from launch. */
export type Deadline = { readonly clock: string } | { readonly durationSeconds: number };

const SECONDS: Readonly<Record<string, number>> = { h: 3600, min: 60, s: 1 };

/** Reads a deadline that has passed the schema: "06:30" or "1 h 30 min". */
export function readDeadline(text: string): Deadline {
  const clock = /^\s*(\d{1,2}):(\d{2})\s*$/.exec(text);
  if (clock !== null) return { clock: `${clock[1]!.padStart(2, "0")}:${clock[2]}` };
  const parts = [...text.matchAll(/(\d+(?:\.\d+)?)\s*(h|min|s)/g)];
  return { durationSeconds: parts.reduce((sum, part) => sum + Number(part[1]) * SECONDS[part[2]!]!, 0) };
}

/**
 * Time from launch to deadline. A clock time is its next occurrence in local time, so that 06:30 given at 22:00 is tomorrow's.
 *
 * @returns seconds, above zero
 */
export function secondsUntil(deadline: Deadline, now: Date): number {
  if ("durationSeconds" in deadline) return deadline.durationSeconds;
  const [hours, minutes] = deadline.clock.split(":").map(Number);
  const end = new Date(now);
  end.setHours(hours!, minutes!, 0, 0);
  if (end <= now) end.setDate(end.getDate() + 1);
  return (end.getTime() - now.getTime()) / 1000;
}

/**
 * Shortest time in which workers get through runs, each run on one worker at a time: the work shared out evenly, or the
 * longest run where that takes longer. A lower bound for any schedule; list scheduling stays below twice of it (Graham 1966).
 *
 * @param runSeconds compute of each run, s
 * @returns s
 */
export function wallSeconds(runSeconds: readonly number[], workers: number): number {
  let sum = 0;
  let longest = 0;
  for (const seconds of runSeconds) {
    sum += seconds;
    longest = Math.max(longest, seconds);
  }
  return Math.max(sum / Math.max(1, workers), longest);
}
