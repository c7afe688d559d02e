import type { CampaignAxis, CampaignFile } from "../contract/campaign-schema.ts";
import { AppError } from "../contract/index.ts";

/** How many runs a campaign comes to at the most, counted without making any. */
export interface RunCount {
  /** Combinations of the axes, exclusions not yet taken off. */
  readonly points: number;
  /** Points with all their variants, single cases and companions: no expansion has more runs. */
  readonly atMost: number;
}

/** More runs than this are not expanded before a person (or a script, by number) has said that they are meant. */
export const RUNS_WITHOUT_ASKING = 10_000;
/** More runs than this are refused whoever asks: split the campaign. */
export const RUNS_MAX = 200_000;

/** Counts a campaign's runs before anything is expanded. */
export function countRuns(file: CampaignFile): RunCount {
  const points = countPoints(file);
  const singles = file.single_cases.length + file.single_cases.filter((c) => c.with_baseline).length;
  const swept = points * (1 + file.variants.length);
  return { points, atMost: swept + singles + countCompanions(file, points) };
}

function countPoints({ axes, combine }: CampaignFile): number {
  if (axes.length === 0) return 1;
  const counts = axes.map(settingCount);
  if (typeof combine === "object") return combine.space_filling;
  if (combine === "paired") return Math.max(...counts);
  return counts.reduce((product, count) => product * Math.max(1, count), 1);
}

function settingCount(axis: CampaignAxis): number {
  return axis.settings?.length ?? axis.values?.length ?? axis.range?.count ?? axis.log_range?.count ?? 1;
}

function countCompanions({ sufficiency, axes }: CampaignFile, points: number): number {
  if (sufficiency === "off" || sufficiency === false) return 0;
  const aspects = [sufficiency.wake_length, sufficiency.step, sufficiency.strips];
  const asked = aspects.filter((setting) => setting !== "off" && setting !== false).length;
  const tested =
    sufficiency.at === "every run"
      ? points
      : sufficiency.at === "middle"
        ? 1
        : 1 + 2 ** Math.min(4, axes.length);
  return asked * Math.min(points, tested);
}

/**
 * Refuses a campaign of very many runs unless they have been said to be meant.
 *
 * @throws CAMPAIGN_TOO_LARGE with the number, and how to confirm it
 */
export function refuseRunsByMistake(file: CampaignFile, fileName: string, meant: boolean): void {
  const { points, atMost } = countRuns(file);
  const product =
    file.axes.length > 1 && file.combine === "every combination"
      ? ` (${file.axes.map(settingCount).join(" × ")} = ${points} combinations)`
      : "";
  const what = `the campaign comes to as many as ${atMost} runs${product}`;
  if (atMost > RUNS_MAX)
    throw new AppError("CAMPAIGN_TOO_LARGE", `${what}; one campaign holds ${RUNS_MAX}`, {
      where: fileName,
      fix: "Give the axes fewer values, take space_filling samples, or split the campaign.",
    });
  if (atMost > RUNS_WITHOUT_ASKING && !meant)
    throw new AppError(
      "CAMPAIGN_TOO_LARGE",
      `${what}; more than ${RUNS_WITHOUT_ASKING} are not begun unasked`,
      {
        where: fileName,
        fix: `If they are meant, say so with --yes. Else give the axes fewer values, or take space_filling samples.`,
      },
    );
}
