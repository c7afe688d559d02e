import { AppError, type Plan } from "../contract/index.ts";

/** When a night that begins now ends, in milliseconds since the epoch; null for no end. A clock time is the next such time here. */
export function resolveDeadline(deadline: Plan["deadline"], nowMs: number): number | null {
  if (deadline === null) return null;
  if ("durationSeconds" in deadline) return nowMs + 1000 * deadline.durationSeconds;
  const match = /^([01]?\d|2[0-3]):([0-5]\d)$/.exec(deadline.clock);
  if (match === null)
    throw new AppError("CAMPAIGN_INVALID", `"${deadline.clock}" is no time of day`, {
      where: "deadline",
      fix: "Write hours and minutes, like 06:30.",
    });
  const end = new Date(nowMs);
  end.setHours(Number(match[1]), Number(match[2]), 0, 0);
  if (end.getTime() <= nowMs) end.setDate(end.getDate() + 1);
  return end.getTime();
}
