import { rm } from "node:fs/promises";
import { join } from "node:path";
import { AppError } from "../../orchestrator/contract/index.ts";
import { type HistoryTable, historyCsv, historyJson } from "../../orchestrator/exports/history-text.ts";
import { campaignLoads, nightIn } from "../../orchestrator/night/index.ts";
import { nameList, nearestName } from "../../orchestrator/planning/nearest-name.ts";
import type { DataFolder } from "../../orchestrator/store/data-folder.ts";
import { type RunHistory, readHistory } from "../../orchestrator/store/read-history.ts";
import type { Answers } from "./answers.ts";
import type { LiveNight } from "./live-night.ts";

/** The answers of the process that holds the folder; `close` leaves the folder open. */
export function folderAnswers(folder: DataFolder, liveNight: () => LiveNight | null): Answers {
  const { store } = folder;
  return {
    campaigns: () => store.campaigns(),
    campaignState: (campaign) => store.campaignState(campaign),
    liveNight: async () => liveNight(),
    loads: async (campaign) => {
      const names = campaign === null ? (await store.campaigns()).map((c) => c.campaign).sort() : [campaign];
      const rows = [];
      // One after the other: each may be large, and they share one connection anyway.
      for (const name of names) rows.push(...campaignLoads(await store.campaignState(name)));
      return rows;
    },
    runDetail: (runId) => store.runDetail(runId),
    history: async (runId, { attempt, channel, format }) => {
      const history = await readHistory(folder, runId, attempt ?? undefined);
      const table = historyTable(history, channel);
      return piecewise(format === "csv" ? historyCsv(table) : historyJson(table));
    },
    stop: async (campaign) => {
      await store.markStop(campaign);
      const going = nightIn(folder);
      if (going?.campaign === campaign) await going.night.stop();
    },
    remove: (campaign) => removeFromFolder(folder, campaign),
    close: async () => {},
  };
}

async function removeFromFolder(
  folder: DataFolder,
  campaign: string,
): Promise<{ runsDeleted: number; runsKept: number }> {
  if (nightIn(folder)?.campaign === campaign)
    throw new AppError("STATE_CONFLICT", `campaign "${campaign}" is being computed`, {
      where: campaign,
      fix: `Stop it first: midwatch stop ${campaign}.`,
    });
  const { files, runsDeleted, runsKept } = await folder.store.remove(campaign);
  // Files that outlive a crash here are swept when the folder is opened the next time.
  for (const file of files) await rm(join(folder.dir, file), { force: true });
  return { runsDeleted, runsKept };
}

function historyTable(history: RunHistory, wanted: readonly string[]): HistoryTable {
  const { runId, attempt, dtSeconds, times, channels, columns } = history;
  const all = channels.map((info, k) => ({ info, values: columns[k]! }));
  const find = (name: string) => {
    const found = all.find(({ info }) => info.name === name);
    if (found === undefined)
      throw noChannel(
        runId,
        name,
        channels.map((info) => info.name),
      );
    return found;
  };
  return { runId, attempt, dtSeconds, time: times, channels: wanted.length === 0 ? all : wanted.map(find) };
}

function noChannel(runId: string, name: string, names: readonly string[]): AppError {
  const near = nearestName(name, names);
  return new AppError("NOT_FOUND", `run ${runId} has no channel ${JSON.stringify(name)}`, {
    where: runId,
    fix: `${near === null ? "" : `Did you mean ${near}? `}It has ${nameList(names, 60)}.`,
  });
}

/** Lets other work in between two pieces, so that a long history does not hold up the night. */
async function* piecewise(pieces: Iterable<string>): AsyncGenerator<string> {
  for (const piece of pieces) {
    yield piece;
    await new Promise<void>((resolve) => setImmediate(resolve));
  }
}
