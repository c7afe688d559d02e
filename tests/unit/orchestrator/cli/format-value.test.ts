import { describe, expect, it } from "vitest";
import { formatDuration, formatInterval } from "../../../../orchestrator/cli/format-value.ts";

describe("a mean with its half-width", () => {
  it.each<[number | null, number | null, string]>([
    [0.45162, 0.00271, "0.4516 ± 0.0027"],
    [0.45162, 0.27, "0.45 ± 0.27"],
    [-12.3456, 1.234, "-12.3 ± 1.2"],
    [12345.6, 123, "12350 ± 120"],
    [1e15, 123, "1.00000000000000e+15 ± 1.2e+2"],
    [0.3, 0, "0.3 ± 0"],
    [0.3, null, "0.3"],
    [1 / 3, Number.NaN, "0.333333"],
    [null, null, "–"],
    [0, 1e-12, "0.0 ± 1.0e-12"],
    [1.5, 1e-12, "1.5000000000000 ± 1.0e-12"],
  ])("%s and %s print as %s", (mean, halfWidth, text) => {
    expect(formatInterval(mean, halfWidth)).toBe(text);
  });
});

describe("a span of time", () => {
  it.each<[number, string]>([
    [0.25, "0.3 s"],
    [42.4, "42 s"],
    [59.6, "1 min 0 s"],
    [200, "3 min 20 s"],
    [25_500, "7 h 05 min"],
    [3599.6, "1 h 00 min"],
  ])("%s s is %s", (seconds, text) => {
    expect(formatDuration(seconds)).toBe(text);
  });
});
