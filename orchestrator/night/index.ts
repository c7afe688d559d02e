// The night: what happens next. Legs, remedies, early stop, deadline, loads. Nothing here computes a step or knows how
// the queue and the store are made. Read api.ts first (what a night is given, tells and returns), then start-night.ts.
//
// From elsewhere in the orchestrator, for whoever composes a night:
//   store/open-data-folder.ts  openDataFolder(dir, { onNotice }) -> DataFolder   DATA_FOLDER_BUSY, DISK_FULL
//   store/server-file.ts       writeServerFile(dir, info), readServerFile(dir), removeServerFile(dir)
//   store/read-history.ts      readHistory(folder, runId, attempt?) -> { times, channels, info }
//   workers/child-pool.ts      createChildPool({ size, memoryMegabytes }) -> LegRunner
export type {
  LoadRow,
  Night,
  NightEnd,
  NightEvent,
  NightOptions,
  NightSummary,
  RunName,
  UncertaintyBudget,
} from "./api.ts";
