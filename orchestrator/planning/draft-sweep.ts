import type { CampaignFile } from "../contract/campaign-schema.ts";
import { AppError } from "../contract/index.ts";
import type { AxisValue, ResolvedAxis } from "./axis-values.ts";
import { axisOf, VARIANT_AXIS } from "./check-names.ts";
import type { Campaign } from "./parse-campaign.ts";
import type { AppliedChanges, RunDraft } from "./run-draft.ts";
import { meetsCondition, type SweepPoint, sweepPoints } from "./sweep-points.ts";

/** What the variant axis calls the run without a variant. */
export const AS_GIVEN = "as given";

/** The sweep of a campaign: drafts of its runs, point by point, and what was noticed on the way. */
export interface DraftedSweep {
  readonly runs: readonly RunDraft[];
  readonly warnings: readonly string[];
}

/**
 * Drafts every run of the sweep in file order: each point as given and, beside the baseline, with each variant.
 *
 * @throws CAMPAIGN_EMPTY where exclusions leave nothing
 */
export function draftSweep(campaign: Campaign, axes: readonly ResolvedAxis[]): DraftedSweep {
  const { combine, variants, baseline, leave_out } = campaign.file;
  const points = sweepPoints(axes, combine);
  const others = variants.flatMap((variant, i) =>
    variant.name === baseline ? [] : [{ ...variant, index: i }],
  );
  const all = points.flatMap((point) => [
    draft(point, axes, others.length > 0 ? AS_GIVEN : null, []),
    ...others.map(({ name, set, index }) =>
      draft(point, axes, name, [{ changes: set, at: ["variants", index], keyed: true }]),
    ),
  ]);
  const used = new Set<number>();
  const runs = all.filter((run) => {
    const hits = leave_out.flatMap((rule, i) => (isLeftOut(run, rule, axes) ? [i] : []));
    for (const hit of hits) used.add(hit);
    return hits.length === 0;
  });
  if (runs.length === 0)
    throw new AppError("CAMPAIGN_EMPTY", `leave_out leaves none of the ${all.length} runs of the sweep`, {
      where: placeWords(campaign, ["leave_out"]),
      fix: "Take back one of its rules, or add values to an axis.",
    });
  const idle = leave_out.flatMap((_, i) =>
    used.has(i) ? [] : [`leave_out rule ${i + 1} leaves out nothing`],
  );
  return { runs, warnings: idle };
}

/** A place in the campaign file as `file:line:column`. */
export function placeWords(campaign: Campaign, at: readonly PropertyKey[]): string {
  const { line, column } = campaign.placeOf(at);
  return `${campaign.fileName}:${line}:${column}`;
}

function draft(
  point: SweepPoint,
  axes: readonly ResolvedAxis[],
  variant: string | null,
  changes: readonly AppliedChanges[],
): RunDraft {
  const varied: Record<string, AxisValue> = {};
  const words: Record<string, string> = {};
  for (const [i, axis] of axes.entries()) {
    varied[axis.name] = point[i]!.value;
    words[axis.name] = point[i]!.label;
  }
  if (variant !== null) varied[VARIANT_AXIS] = variant;
  return {
    role: "sweep",
    name: variant === AS_GIVEN ? null : variant,
    varied,
    words,
    trail: [
      ...point.map(({ changes: set, at }) => ({ changes: set, at, keyed: at[2] === "settings" })),
      ...changes,
    ],
    position: point.map((setting) => setting.position),
  };
}

function isLeftOut(
  run: RunDraft,
  rule: CampaignFile["leave_out"][number],
  axes: readonly ResolvedAxis[],
): boolean {
  return Object.entries(rule.when).every(([key, condition]) => {
    const value = run.varied[axisOf(key, axes)?.name ?? key];
    return value !== undefined && value !== null && meetsCondition(value, condition);
  });
}

/** Drafts the cases outside the sweep. */
export function draftSingles(campaign: Campaign): RunDraft[] {
  return campaign.file.single_cases.map(({ name, set }, i) => ({
    role: "single",
    name,
    varied: {},
    words: {},
    trail: [{ changes: set, at: ["single_cases", i], keyed: true }],
    position: null,
  }));
}

/** The baseline of a run: the same run with the changes of the baseline variant on top. */
export function draftBaseline(campaign: Campaign, run: RunDraft): RunDraft | null {
  const { variants, baseline } = campaign.file;
  const index = variants.findIndex((variant) => variant.name === baseline);
  const variant = variants[index];
  if (variant === undefined) return null;
  return {
    role: "baseline",
    name: variant.name,
    varied: run.varied,
    words: run.words,
    trail: [...run.trail, { changes: variant.set, at: ["variants", index], keyed: true }],
    position: run.position,
  };
}
