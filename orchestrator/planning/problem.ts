import { AppError, type ErrorCode } from "../contract/index.ts";

/** A place in a text file, both counted from 1. */
export interface TextPlace {
  readonly line: number;
  readonly column: number;
}

/** One thing that is wrong with a campaign file. */
export interface Problem {
  readonly place: TextPlace;
  /** Path of the field as a person writes it, `wing.span_m`; empty for the file as a whole. */
  readonly field: string;
  /** What was given and what is allowed, in a sentence without a full stop. */
  readonly words: string;
  /** The nearest valid name, or what to write instead. */
  readonly instead?: string;
}

/** More problems than this are counted, not listed. */
const LISTED_MAX = 40;

/** Makes one error of all that is wrong with a file: a line for each problem, in file order, each with its place. */
export function problemsError(
  code: ErrorCode,
  fileName: string,
  problems: readonly Problem[],
  fix?: string,
): AppError {
  const sorted = [...new Map(problems.map((p) => [lineOf(fileName, p), p])).entries()].sort(
    ([, a], [, b]) => a.place.line - b.place.line || a.place.column - b.place.column,
  );
  const [first] = sorted;
  if (first === undefined) throw new AppError("BUG", "an error was made of no problem at all");
  const where = `${fileName}:${first[1].place.line}:${first[1].place.column}`;
  const advice = fix ?? "Mend what is named above; midwatch schema prints every field with what it takes.";
  if (sorted.length === 1) return new AppError(code, sentence(first[1]), { where, fix: advice });
  const listed = sorted.slice(0, LISTED_MAX).map(([line]) => `  ${line}`);
  const rest = sorted.length > LISTED_MAX ? [`  and ${sorted.length - LISTED_MAX} more`] : [];
  const what = [`${fileName} has ${sorted.length} problems:`, ...listed, ...rest].join("\n");
  return new AppError(code, what, { where, fix: advice });
}

function lineOf(fileName: string, problem: Problem): string {
  return `${fileName}:${problem.place.line}:${problem.place.column}  ${sentence(problem)}`;
}

function sentence(problem: Problem): string {
  const field = problem.field === "" ? "" : `${problem.field}: `;
  return `${field}${problem.words}${problem.instead === undefined ? "" : `; ${problem.instead}`}`;
}
