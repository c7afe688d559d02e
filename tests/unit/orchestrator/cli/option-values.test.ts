import { describe, expect, it } from "vitest";
import {
  confidenceValue,
  periodValue,
  positiveValue,
  repeatable,
  toleranceValue,
  wholeValue,
  wordValue,
} from "../../../../orchestrator/cli/option-values.ts";

describe("values of options", () => {
  it("reads a tolerance as a number or as percent", () => {
    expect(toleranceValue("0.005")).toEqual({ absolute: 0.005 });
    expect(toleranceValue("1%")).toEqual({ percent: 1 });
    expect(toleranceValue(" 2.5 % ")).toEqual({ percent: 2.5 });
  });

  it.each(["", "%", "0", "-1", "one", "NaN", "1%%", "Infinity", "1 m"])(
    "refuses the tolerance %j",
    (text) => {
      expect(() => toleranceValue(text)).toThrow(`--tolerance does not take ${JSON.stringify(text)}`);
    },
  );

  it("takes a confidence between a half and one, and guesses what 95 meant", () => {
    expect(confidenceValue("0.99")).toBe(0.99);
    for (const text of ["1", "0.5", "", "-1", "x"])
      expect(() => confidenceValue(text)).toThrow("--confidence");
    expect(() => confidenceValue("95")).toThrowError(
      expect.objectContaining({ fix: expect.stringContaining("0.95") }),
    );
  });

  it("takes positive numbers, whole numbers and words", () => {
    expect(positiveValue("--period-time", "the unit of time")("0.365")).toBe(0.365);
    for (const text of ["0", "", "x", "-1"])
      expect(() => positiveValue("--period-time", "s")(text)).toThrow("--period-time");
    expect(periodValue("36.5")).toBe(36.5);
    for (const text of ["1.9", "", "x"]) expect(() => periodValue(text)).toThrow("--period");
    expect(wholeValue("--planned", 1)("5000")).toBe(5000);
    for (const text of ["0", "1.5", "", "9007199254740993"])
      expect(() => wholeValue("--planned", 1)(text)).toThrow("--planned");
    expect(wordValue("--format", ["csv", "json"])("csv")).toBe("csv");
    expect(() => wordValue("--format", ["csv", "json"])("xml")).toThrowError(
      expect.objectContaining({ fix: "Give one of: csv, json." }),
    );
  });

  it("gathers repeated options in order", () => {
    const gather = repeatable(Number);
    expect(gather("2", gather("1", undefined))).toEqual([1, 2]);
  });
});
