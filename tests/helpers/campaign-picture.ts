import { createHash } from "node:crypto";
import type { DataFolder } from "../../orchestrator/store/data-folder.ts";
import { readHistory } from "../../orchestrator/store/read-history.ts";
import type { CampaignRun } from "../../orchestrator/store/rows.ts";

/** Everything of a run that must not depend on when and how it was computed: all but seconds and counts of legs. */
export interface RunPicture extends Pick<CampaignRun, "label" | "state" | "attempt" | "remedy" | "verdict"> {
  readonly reason: string | null;
  readonly stopCause: string | null;
  readonly steps: number;
  readonly longestSteps: number;
  /** Every number of the judgement in its shortest exact form. */
  readonly judgement: string;
  /** Digest of every bit of the attempt's history. */
  readonly history: string;
}

/** A campaign without anything that may differ between two equal campaigns. */
export async function campaignPicture(folder: DataFolder, campaign: string): Promise<RunPicture[]> {
  const { list } = await folder.store.campaignState(campaign);
  const pictures: RunPicture[] = [];
  for (const run of list) {
    const { label, state, attempt, remedy, verdict, reason, stopCause, steps, longestSteps } = run;
    pictures.push({
      label,
      state,
      attempt,
      remedy,
      verdict,
      reason,
      stopCause,
      steps,
      longestSteps,
      judgement: JSON.stringify(run.judgement),
      history: await digest(folder, run),
    });
  }
  return pictures;
}

async function digest(folder: DataFolder, run: CampaignRun): Promise<string> {
  const { times, columns } = await readHistory(folder, run.runId, run.attempt);
  const hash = createHash("sha256");
  for (const column of [times, ...columns])
    hash.update(new Uint8Array(column.buffer, column.byteOffset, column.byteLength));
  return `${times.length} ${hash.digest("hex")}`;
}
