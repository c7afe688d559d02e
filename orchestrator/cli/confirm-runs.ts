import { createInterface } from "node:readline/promises";
import { AppError } from "../contract/index.ts";
import { type Campaign, countRuns, RUNS_MAX, RUNS_WITHOUT_ASKING } from "../planning/index.ts";
import type { CliIo } from "./cli-io.ts";

/**
 * Asks a person at a terminal whether a very large number of runs is meant; they answer with the number. A script is not
 * asked: it says --yes, or expansion refuses.
 *
 * @returns whether they are meant, for expandCampaign
 * @throws CAMPAIGN_TOO_LARGE where the answer is anything else
 */
export async function confirmRuns(io: CliIo, campaign: Campaign, yes: boolean): Promise<boolean> {
  const { atMost } = countRuns(campaign.file);
  const asks = atMost > RUNS_WITHOUT_ASKING && atMost <= RUNS_MAX && !yes;
  if (!asks || io.stdin.isTTY !== true || io.stderr.isTTY !== true) return yes;
  const lines = createInterface({ input: io.stdin, output: io.stderr });
  try {
    const answer = await lines.question(
      `This campaign comes to as many as ${atMost} runs. Type that number to go on: `,
    );
    if (Number(answer.replaceAll(/[\s_,']/g, "")) === atMost) return true;
  } finally {
    lines.close();
  }
  throw new AppError("CAMPAIGN_TOO_LARGE", `${atMost} runs were not confirmed`, {
    where: campaign.fileName,
    fix: "Give the axes fewer values, or take space_filling samples.",
  });
}
