import { AppError, type Tolerance } from "../contract/index.ts";

/** A tolerance as given on the command line: `0.005` or `1%`. */
export function toleranceValue(text: string): Tolerance {
  const percent = /^(.*)%$/.exec(text.trim());
  const value = Number(percent?.[1] ?? text);
  if (text.trim() === "" || percent?.[1] === "" || !(value > 0) || !Number.isFinite(value))
    throw wrong(
      "--tolerance",
      text,
      "Give a positive number in the unit of the channel (0.005), or percent of the mean (1%).",
    );
  return percent === null ? { absolute: value } : { percent: value };
}

/** A confidence level strictly between one half and one. */
export function confidenceValue(text: string): number {
  const value = plainNumber(text);
  if (value > 0.5 && value < 1) return value;
  const fix = value >= 50 && value < 100 ? `Did you mean ${value / 100}?` : "Give a fraction such as 0.95.";
  throw wrong("--confidence", text, `${fix} It has to lie between 0.5 and 1.`);
}

/** A period in samples: at least two of them. */
export function periodValue(text: string): number {
  const value = plainNumber(text);
  if (value >= 2 && Number.isFinite(value)) return value;
  throw wrong(
    "--period",
    text,
    "Give a length in samples, 2 or more; it need not be whole. In the unit of time it is --period-time.",
  );
}

/** A number above zero, for the option named. */
export function positiveValue(option: string, unit: string): (text: string) => number {
  return (text) => {
    const value = plainNumber(text);
    if (value > 0 && Number.isFinite(value)) return value;
    throw wrong(option, text, `Give a positive number of ${unit}.`);
  };
}

/** A whole number from `min` on, for the option named. */
export function wholeValue(option: string, min: number): (text: string) => number {
  return (text) => {
    const value = plainNumber(text);
    if (Number.isSafeInteger(value) && value >= min) return value;
    throw wrong(option, text, `Give a whole number, ${min} or more.`);
  };
}

/** One of a few words, for the option named. */
export function wordValue<T extends string>(option: string, words: readonly T[]): (text: string) => T {
  return (text) => {
    const found = words.find((word) => word === text);
    if (found !== undefined) return found;
    throw wrong(option, text, `Give one of: ${words.join(", ")}.`);
  };
}

/** Gathers the values of an option that may be given several times. */
export function repeatable<T>(
  parse: (text: string) => T,
): (text: string, before: readonly T[] | undefined) => T[] {
  return (text, before) => [...(before ?? []), parse(text)];
}

function plainNumber(text: string): number {
  return text.trim() === "" ? Number.NaN : Number(text);
}

function wrong(option: string, text: string, fix: string): AppError {
  return new AppError("USAGE", `${option} does not take ${JSON.stringify(text)}`, { where: option, fix });
}
