import type { LiveNight } from "../../api/http/index.ts";
import type { CampaignState, CampaignSummary } from "../store/rows.ts";
import { formatDuration } from "./format-value.ts";
import { clockWords, runWords, tallyWords } from "./night-words.ts";
import { drawTable, type TableStyle } from "./run-table.ts";

/** All campaigns of a data folder, and the night that is going on. */
export function campaignsWords(
  campaigns: readonly CampaignSummary[],
  night: LiveNight | null,
  style: TableStyle & { now: Date },
): string {
  if (campaigns.length === 0) return "No campaign has been launched in this data folder.";
  const table = drawTable(
    ["campaign", "standing", "done", "verdicts", "compute", "launched", "title"],
    campaigns.map((c) => [
      c.campaign,
      c.standing,
      `${c.done} of ${c.runs}`,
      verdictWords(c.verdicts),
      formatDuration(c.computeSeconds),
      clockWords(new Date(c.createdMs), style.now),
      c.title,
    ]),
    style,
  );
  return [table, ...nightWords(night, style.now)].join("\n");
}

/** One campaign: how it stands, and every run. */
export function campaignWords(
  state: CampaignState,
  night: LiveNight | null,
  style: TableStyle & { now: Date },
): string {
  const heading = `${state.campaign} (${state.title}): ${state.standing}, ${state.done} of ${state.runs} runs done, ${formatDuration(state.computeSeconds)} of compute`;
  const table = drawTable(
    ["run", "id", "label", "state", "verdict", "steps", "remarks"],
    state.list.map((run) => [
      String(run.number),
      run.runId.slice(0, ID_SHOWN),
      run.label,
      run.state,
      run.verdict ?? "–",
      `${run.steps} of ${run.longestSteps}`,
      [run.reason ?? "", run.remedy === null ? "" : `remedy ${run.remedy.name}: ${run.remedy.cost}`]
        .filter((words) => words !== "")
        .join("; "),
    ]),
    style,
  );
  const own = night?.campaign === state.campaign ? night : null;
  return [heading, table, ...nightWords(own, style.now)].join("\n");
}

/** Enough of an id to tell runs apart and to name one. */
const ID_SHOWN = 12;

function nightWords(night: LiveNight | null, now: Date): string[] {
  if (night === null) return [];
  return [
    "",
    `Going on now, ${night.campaign}: ${tallyWords(night, now)}`,
    ...night.workers.map((worker, k) =>
      worker === null
        ? `  worker ${k + 1}: idle`
        : `  worker ${k + 1}: ${runWords(worker.run)}, attempt ${worker.attempt}, step ${worker.step} of ${worker.longestSteps}`,
    ),
  ];
}

function verdictWords(verdicts: CampaignSummary["verdicts"]): string {
  const parts = Object.entries(verdicts).map(([verdict, count]) => `${count} ${verdict}`);
  return parts.length === 0 ? "–" : parts.join(", ");
}
