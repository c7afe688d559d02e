import type { z } from "zod";
import { caseSchema } from "../contract/case-schema.ts";
import { givenWords } from "./allowed-words.ts";
import { explainIssues } from "./explain-issue.ts";
import { FieldCatalogue } from "./field-catalogue.ts";
import { type FieldStep, type Inputs, parseFieldPath } from "./field-path.ts";
import { nearestName } from "./nearest-name.ts";
import type { Problem, TextPlace } from "./problem.ts";

/** Solvers that a campaign may name here. */
const SOLVERS = ["built-in"];

/** Fields of the built-in model's case. */
export const caseCatalogue = new FieldCatalogue(caseSchema);

type PlaceOf = (path: readonly PropertyKey[]) => TextPlace;

/** A complete case, or what is wrong with its inputs. */
export type CheckedCase =
  | { readonly kind: "case"; readonly inputs: z.output<typeof caseSchema> }
  | { readonly kind: "problems"; readonly issues: readonly z.core.$ZodIssue[] };

/** Holds inputs against the model's schema and fills in its defaults. */
export function checkCase(inputs: Inputs): CheckedCase {
  const result = caseSchema.safeParse(inputs);
  return result.success
    ? { kind: "case", inputs: result.data }
    : { kind: "problems", issues: result.error.issues };
}

/** The schema's complaints about a case in a person's words. */
export function caseProblems(
  issues: readonly z.core.$ZodIssue[],
  inputs: unknown,
  placeOf: PlaceOf,
): Problem[] {
  return explainIssues(issues, { catalogue: caseCatalogue, value: inputs, placeOf, prefix: "case" });
}

/**
 * What is wrong with the base case of a campaign, however wrong the rest of the file is. Fields that an axis will supply
 * may be missing.
 */
export function baseCaseProblems(campaign: unknown, placeOf: PlaceOf): Problem[] {
  const { solver = "built-in", case: base } = asBlock(campaign);
  if (typeof solver === "string" && !SOLVERS.includes(solver)) {
    const near = nearestName(solver, SOLVERS);
    return [
      {
        place: placeOf(["solver"]),
        field: "solver",
        words: `${givenWords(solver)} was given; takes ${SOLVERS.join(" or ")}`,
        ...(near !== null && { instead: `did you mean ${near}?` }),
      },
    ];
  }
  if (typeof base !== "object" || base === null || Array.isArray(base)) return [];
  const checked = checkCase(base as Inputs);
  if (checked.kind === "case") return [];
  const supplied = suppliedPaths(campaign);
  const open = checked.issues.filter((issue) => !isSupplied(issue, supplied));
  return caseProblems(open, base, (path) => placeOf(["case", ...path]));
}

function isSupplied(issue: z.core.$ZodIssue, supplied: readonly (readonly FieldStep[])[]): boolean {
  return supplied.some(
    (path) =>
      path.length >= issue.path.length &&
      issue.path.every((step, i) => path[i] === step || (path[i] === "*" && typeof step === "number")),
  );
}

/** Field paths that the axes of a campaign move, read from a file that may be wrong anywhere. */
function suppliedPaths(campaign: unknown): (readonly FieldStep[])[] {
  const texts = asList(asBlock(campaign).axes).flatMap((entry) => {
    const axis = asBlock(entry);
    return [
      axis.field,
      ...asList(axis.fields),
      ...asList(axis.settings).flatMap((s) => Object.keys(asBlock(asBlock(s).set))),
    ];
  });
  return texts
    .filter((text) => typeof text === "string" && text !== "")
    .flatMap((text) => {
      try {
        return [parseFieldPath(text as string)];
      } catch {
        // A path that cannot be read is reported where axes are checked.
        return [];
      }
    });
}

function asBlock(value: unknown): Readonly<Record<string, unknown>> {
  return typeof value === "object" && value !== null && !Array.isArray(value)
    ? (value as Record<string, unknown>)
    : {};
}

function asList(value: unknown): readonly unknown[] {
  return Array.isArray(value) ? value : [];
}
