import { describe, expect, it } from "vitest";
import { readDeadline, secondsUntil, wallSeconds } from "../../../../orchestrator/planning/predict-cost.ts";

describe("readDeadline", () => {
  it("reads clock times and durations", () => {
    expect(readDeadline("6:30")).toEqual({ clock: "06:30" });
    expect(readDeadline("1 h 30 min")).toEqual({ durationSeconds: 5400 });
    expect(readDeadline("90min")).toEqual({ durationSeconds: 5400 });
    expect(readDeadline("0.5 h 10 s")).toEqual({ durationSeconds: 1810 });
  });
});

describe("secondsUntil", () => {
  it("takes the next occurrence of a clock time, tomorrow's where today's is past or now", () => {
    const evening = new Date(2026, 2, 10, 22, 0, 0);
    expect(secondsUntil({ clock: "23:15" }, evening)).toBe(4500);
    expect(secondsUntil({ clock: "06:30" }, evening)).toBe(8.5 * 3600);
    expect(secondsUntil({ clock: "22:00" }, evening)).toBe(24 * 3600);
    expect(secondsUntil({ durationSeconds: 60 }, evening)).toBe(60);
  });
});

describe("wallSeconds", () => {
  it("shares work out evenly, but never below the longest run", () => {
    expect(wallSeconds([10, 10, 10, 10], 2)).toBe(20);
    expect(wallSeconds([30, 1, 1], 4)).toBe(30);
    expect(wallSeconds([], 2)).toBe(0);
  });
});
