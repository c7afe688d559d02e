import type { ResolvedAxis } from "./axis-values.ts";
import { fieldPathProblem } from "./check-axes.ts";
import { nameList, nearestName } from "./nearest-name.ts";
import type { Campaign } from "./parse-campaign.ts";
import type { Problem } from "./problem.ts";

type At = readonly (string | number)[];

/** The pseudo-axis that tells a variant from the run as given. */
export const VARIANT_AXIS = "variant";

/** Field paths in variants, single cases, remedies and settings that the case does not have. */
export function changesProblems(campaign: Campaign): Problem[] {
  const { axes, variants, single_cases, remedies } = campaign.file;
  const within = (sets: readonly { readonly set: Readonly<Record<string, unknown>> }[], at: At) =>
    sets.flatMap(({ set }, i) =>
      Object.keys(set).map((path) => fieldPathProblem(campaign, path, [...at, i, "set", path])),
    );
  const found = [
    ...axes.flatMap((axis, i) => within(axis.settings ?? [], ["axes", i, "settings"])),
    ...within(variants, ["variants"]),
    ...within(single_cases, ["single_cases"]),
    ...within(remedies, ["remedies"]),
  ];
  return found.filter((problem) => problem !== null);
}

/** Names given twice, and names that point at nothing. */
export function namesProblems(campaign: Campaign, axes: readonly ResolvedAxis[]): Problem[] {
  const { variants, single_cases, remedies, baseline, leave_out } = campaign.file;
  const axisNames = axes.map((axis) => axis.name);
  const problems = [
    ...twice(campaign, "axes", axisNames),
    ...twice(
      campaign,
      "variants",
      variants.map((v) => v.name),
    ),
    ...twice(
      campaign,
      "single_cases",
      single_cases.map((c) => c.name),
    ),
    ...twice(
      campaign,
      "remedies",
      remedies.map((r) => r.name),
    ),
  ];
  const variantNames = variants.map((v) => v.name);
  if (baseline !== undefined && !variantNames.includes(baseline))
    problems.push(
      unknownName(campaign, ["baseline"], `there is no variant called "${baseline}"`, baseline, variantNames),
    );
  for (const [i, { when }] of leave_out.entries())
    for (const key of Object.keys(when))
      if (axisOf(key, axes) === undefined && key !== VARIANT_AXIS)
        problems.push(
          unknownName(
            campaign,
            ["leave_out", i, "when", key],
            `there is no axis called "${key}"`,
            key,
            axisNames,
          ),
        );
  return problems;
}

/** Axis that is meant by its name, or by a field that it moves. */
export function axisOf(key: string, axes: readonly ResolvedAxis[]): ResolvedAxis | undefined {
  return axes.find((axis) => axis.name === key) ?? axes.find((axis) => axis.fields.includes(key));
}

function unknownName(
  campaign: Campaign,
  at: At,
  words: string,
  given: string,
  valid: readonly string[],
): Problem {
  const near = nearestName(given, valid);
  const field = at.map((step) => (typeof step === "number" ? step + 1 : step)).join(".");
  return {
    place: campaign.placeOf(at),
    field,
    words,
    instead: near === null ? `there are: ${nameList(valid)}` : `did you mean ${near}?`,
  };
}

function twice(campaign: Campaign, list: string, names: readonly string[]): Problem[] {
  return names.flatMap((name, i) => {
    const first = names.indexOf(name);
    if (first === i) return [];
    const words = `"${name}" is the name of number ${first + 1} already`;
    const instead = list === "axes" ? "give one of them a name of its own" : "give it another name";
    return [{ place: campaign.placeOf([list, i]), field: `${list}.${i + 1}`, words, instead }];
  });
}
