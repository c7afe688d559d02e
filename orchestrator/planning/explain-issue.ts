import type { z } from "zod";
import { allowedWords, givenWords, printable, unitOfField } from "./allowed-words.ts";
import type { FieldCatalogue } from "./field-catalogue.ts";
import { valueAt, writeFieldPath } from "./field-path.ts";
import { nameList, nearestName } from "./nearest-name.ts";
import type { Problem, TextPlace } from "./problem.ts";

type Issue = z.core.$ZodIssue;
type Path = readonly (string | number)[];

/** What an issue is explained with: the schema's fields, the value that was checked, and where its fields stand. */
export interface IssueContext {
  readonly catalogue: FieldCatalogue;
  readonly value: unknown;
  /** Place in the text of a field of the checked value. */
  readonly placeOf: (path: Path) => TextPlace;
  /** Put before the field's path in the message, as `case`. */
  readonly prefix?: string;
}

/**
 * The schema's complaints in a person's words: place, field, what was given, what is allowed, the nearest valid name. A field
 * that is missing because its name was misspelt is complained about once.
 */
export function explainIssues(issues: readonly Issue[], context: IssueContext): Problem[] {
  const meant = new Set<string>();
  for (const issue of issues)
    if (issue.code === "unrecognized_keys")
      for (const key of issue.keys) {
        const near = nearestName(key, context.catalogue.namesAt(issue.path, context.value));
        if (near !== null) meant.add(JSON.stringify([...issue.path, near]));
      }
  const missing = (issue: Issue) => valueAt(context.value, issue.path as (string | number)[]) === undefined;
  return issues
    .filter((issue) => !(missing(issue) && meant.has(JSON.stringify(issue.path))))
    .flatMap((issue) => explainIssue(issue, context));
}

function explainIssue(issue: Issue, context: IssueContext): Problem[] {
  const path = issue.path.filter((step): step is string | number => typeof step !== "symbol");
  switch (issue.code) {
    case "unrecognized_keys":
      return issue.keys.map((key) => unknownField(path, key, context));
    case "invalid_union":
      return explainUnion(issue, path, context);
    case "custom":
      return [problem(path, context, withGiven(issue.message, valueAt(context.value, path)))];
    case "invalid_key":
    case "invalid_element":
      return issue.issues.flatMap((inner) => explainIssue({ ...inner, path: [...path] } as Issue, context));
    case "invalid_value":
      return [invalidChoice(issue.values.map(String), path, context)];
    default:
      return [wrongValue(issue, path, context)];
  }
}

/** Messages that say what a field takes are completed by what was given, where that is a single value. */
function withGiven(message: string, value: unknown): string {
  return message.startsWith("takes") && typeof value !== "object"
    ? `${givenWords(value)} was given; ${message}`
    : message;
}

function problem(path: Path, context: IssueContext, words: string, instead?: string): Problem {
  const own = writeFieldPath(path.map((step) => (typeof step === "string" ? printable(step, 60) : step)));
  const field = [context.prefix ?? "", own].filter((part) => part !== "").join(".");
  return { place: context.placeOf(path), field, words, ...(instead !== undefined && { instead }) };
}

function unknownField(path: Path, key: string, context: IssueContext): Problem {
  const valid = context.catalogue.namesAt(path, context.value);
  const near = nearestName(key, valid);
  const at = [...path, key];
  if (near === null) return problem(at, context, "there is no such field", elsewhere(key, valid, context));
  const unit = unitOfField(near);
  const otherUnit =
    unit !== null && near !== key && near.slice(0, near.lastIndexOf("_")) === key.replace(/_[^_]*$/, "");
  return problem(
    at,
    context,
    "there is no such field",
    otherUnit ? `give ${near}, in ${unit}` : `did you mean ${near}?`,
  );
}

/** A field that stands in the wrong block is told where it belongs; else the block's own fields are listed. */
function elsewhere(key: string, valid: readonly string[], context: IssueContext): string {
  const home = context.catalogue.leafPaths().find((path) => path.endsWith(`.${key}`));
  return home === undefined ? `fields here are ${nameList(valid, 20)}` : `it belongs at ${home}`;
}

function explainUnion(
  issue: Extract<Issue, { code: "invalid_union" }>,
  path: Path,
  context: IssueContext,
): Problem[] {
  const value = valueAt(context.value, path);
  const isWrongType = (inner: Issue) =>
    inner.path.length === 0 && (inner.code === "invalid_type" || inner.code === "invalid_value");
  const ofRightType = issue.errors.filter((list) => !list.some(isWrongType));
  const structured = typeof value === "object" && value !== null;
  const [only] = ofRightType;
  if (structured && ofRightType.length === 1 && only !== undefined)
    return only.flatMap((inner) =>
      explainIssue({ ...inner, path: [...path, ...inner.path] } as Issue, context),
    );
  const choices = (issue as { options?: readonly unknown[] }).options;
  if (choices !== undefined) return [invalidChoice(choices.map(String), path, context)];
  if (value === undefined || !issue.message.startsWith("takes")) return [wrongValue(issue, path, context)];
  return [problem(path, context, `${givenWords(value)} was given; ${issue.message}`)];
}

function invalidChoice(choices: readonly string[], path: Path, context: IssueContext): Problem {
  const value = valueAt(context.value, path);
  const near = typeof value === "string" ? nearestName(value, choices) : null;
  const words = `${value === undefined ? "is missing" : `${givenWords(value)} was given`}; takes ${choices.length === 1 ? choices[0] : `one of ${nameList(choices, 20)}`}`;
  return problem(path, context, words, near === null ? undefined : `did you mean ${near}?`);
}

function wrongValue(issue: Issue, path: Path, context: IssueContext): Problem {
  const value = valueAt(context.value, path);
  const field = String(path.findLast((step) => typeof step === "string") ?? "");
  const nodes = context.catalogue.nodesAt(path, context.value);
  const ownWords = issue.message.startsWith("takes") ? issue.message : `takes ${allowedWords(nodes, field)}`;
  if (value === undefined) return problem(path, context, `is missing; ${ownWords}`);
  const outside = issue.code === "too_small" || issue.code === "too_big";
  const given =
    outside && typeof value === "number" ? `${value} is out of range` : `${givenWords(value)} was given`;
  return problem(path, context, `${given}; ${ownWords}`);
}
