import type { CampaignAxis } from "../contract/campaign-schema.ts";
import { AppError } from "../contract/index.ts";
import { axisFields } from "./axis-values.ts";
import { caseCatalogue } from "./check-case.ts";
import { type FieldStep, matchFieldPath, parseFieldPath } from "./field-path.ts";
import { nameList, nearestName } from "./nearest-name.ts";
import type { Campaign } from "./parse-campaign.ts";
import type { Problem } from "./problem.ts";

type At = readonly (string | number)[];

/** What is wrong with the axes of a campaign: fields, values, and how they go together. */
export function axesProblems(campaign: Campaign): Problem[] {
  const { axes, combine } = campaign.file;
  const own = axes.flatMap((axis, i) => axisProblems(campaign, axis, ["axes", i]));
  return [...own, ...overlapProblems(campaign), ...(combine === "paired" ? pairProblems(campaign) : [])];
}

/** What is wrong with a field path, held against the model's fields and the base case; null where it is fine. */
export function fieldPathProblem(campaign: Campaign, text: string, at: At): Problem | null {
  const place = campaign.placeOf(at);
  const path = readPath(text);
  if (typeof path === "string") return { place, field: text, words: path };
  const base = campaign.file.case;
  if (caseCatalogue.nodesAt(path).length === 0) {
    const leaves = caseCatalogue.leafPaths();
    const general = path.map((step) => (typeof step === "number" ? "*" : step)).join(".");
    const last = String(path.at(-1));
    const near = leaves.find((leaf) => leaf.split(".").at(-1) === last) ?? nearestName(general, leaves);
    return {
      place,
      field: text,
      words: "the case has no such field",
      instead: near === null ? `it has ${nameList(leaves, 8)}` : `did you mean ${near}?`,
    };
  }
  const listAt = path.findIndex((step) => typeof step === "number" || step === "*");
  if (listAt < 0 || matchFieldPath(base, path).length > 0) return null;
  const list = path.slice(0, listAt).join(".");
  const count = matchFieldPath(base, [...path.slice(0, listAt), "*"]).length;
  return {
    place,
    field: text,
    words: `moves nothing: the base case has ${count} ${list}${path[listAt] === "*" ? "" : `, counted from 1`}`,
  };
}

function readPath(text: string): readonly FieldStep[] | string {
  try {
    return parseFieldPath(text);
  } catch (error) {
    if (error instanceof AppError) return error.message;
    throw error;
  }
}

function axisProblems(campaign: Campaign, axis: CampaignAxis, at: At): Problem[] {
  const fields = axisFields(axis);
  const paths = fields.map((field, i) =>
    fieldPathProblem(campaign, field, axis.field === undefined ? [...at, "fields", i] : [...at, "field"]),
  );
  return [
    ...paths.filter((p) => p !== null),
    ...rangeProblems(campaign, axis, at),
    ...repeatedValues(campaign, axis, at),
  ];
}

function rangeProblems(campaign: Campaign, axis: CampaignAxis, at: At): Problem[] {
  const key = axis.range ? "range" : "log_range";
  const span = axis[key];
  if (span === undefined) return [];
  const found = (words: string): Problem[] => [
    { place: campaign.placeOf([...at, key]), field: `${fieldOf(at)}.${key}`, words },
  ];
  if (span.count === undefined && typeof campaign.file.combine !== "object")
    return found("count is missing; a range without one is for space_filling samples");
  if (span.from === span.to)
    return found(`from and to are both ${span.from}; a range needs two different ends`);
  if (key === "log_range" && !(span.from > 0 && span.to > 0))
    return found(`${span.from} to ${span.to} was given; both ends of a log_range have to be above zero`);
  return [];
}

/** Paired axes may repeat a value: only equal pairs are a mistake, and they are found as equal runs. */
function repeatedValues(campaign: Campaign, axis: CampaignAxis, at: At): Problem[] {
  if (campaign.file.combine === "paired") return [];
  const key = axis.settings ? "settings" : "values";
  const values = axis.settings?.map((setting) => setting.name) ?? axis.values ?? [];
  const seen = new Map<unknown, number>();
  return values.flatMap((value, i) => {
    const first = seen.get(value);
    seen.set(value, first ?? i);
    if (first === undefined) return [];
    const words = `${JSON.stringify(value)} was given already, as value ${first + 1}`;
    return [{ place: campaign.placeOf([...at, key, i]), field: `${fieldOf(at)}.${key}.${i + 1}`, words }];
  });
}

const fieldOf = (at: At): string => at.map((step) => (typeof step === "number" ? step + 1 : step)).join(".");

function overlapProblems(campaign: Campaign): Problem[] {
  const moved = campaign.file.axes.flatMap((axis, i) => {
    const fields = axis.settings
      ? [...new Set(axis.settings.flatMap(({ set }) => Object.keys(set)))]
      : axisFields(axis);
    return fields.map((field) => ({ field, axis: i, path: readPath(field) }));
  });
  const problems: Problem[] = [];
  for (const [j, later] of moved.entries()) {
    const earlier = moved
      .slice(0, j)
      .find(
        (other) =>
          overlap(other.path, later.path) &&
          (other.axis !== later.axis || campaign.file.axes[later.axis]?.settings === undefined),
      );
    if (earlier === undefined) continue;
    const words =
      earlier.axis === later.axis
        ? "the axis names this field twice"
        : `is moved by axis ${earlier.axis + 1} already (${earlier.field})`;
    problems.push({
      place: campaign.placeOf(["axes", later.axis]),
      field: later.field,
      words,
      instead: "one field belongs to one axis",
    });
  }
  return problems;
}

/** Whether two paths can reach the same field, one inside the other included. */
function overlap(a: readonly FieldStep[] | string, b: readonly FieldStep[] | string): boolean {
  if (typeof a === "string" || typeof b === "string") return false;
  const shared = Math.min(a.length, b.length);
  return a
    .slice(0, shared)
    .every(
      (step, i) =>
        step === b[i] ||
        (step === "*" && typeof b[i] === "number") ||
        (b[i] === "*" && typeof step === "number"),
    );
}

function pairProblems(campaign: Campaign): Problem[] {
  const counts = campaign.file.axes.map(
    (axis) => axis.settings?.length ?? axis.values?.length ?? axis.range?.count ?? axis.log_range?.count ?? 0,
  );
  if (new Set(counts).size < 2) return [];
  const words = `paired axes need the same number of values; they have ${counts.join(", ")}`;
  return [{ place: campaign.placeOf(["combine"]), field: "combine", words }];
}
