// The night: what happens next. Legs, remedies, early stop, deadline, loads. Nothing here computes a step or knows how
// the queue and the store are made. Read api.ts first (what a night is given, tells and returns), then start-night.ts
// and night-work.ts; next-after-leg.ts, leg-priority.ts and sufficiency.ts are the decisions, as pure functions.
//
// From elsewhere, for whoever composes a night:
//   store/open-data-folder.ts  openDataFolder(dir, { onNotice, now }) -> DataFolder   DATA_FOLDER_BUSY, DISK_FULL
//   store/server-file.ts       writeServerFile(dir, info), readServerFile(dir), removeServerFile(dir)
//   store/read-history.ts      readHistory(folder, runId, attempt?) -> RunHistory
//   workers/child-pool.ts      createChildPool({ size, memoryMegabytes, onNotice }) -> LegRunner
export type {
  LoadRow,
  Night,
  NightEnd,
  NightEvent,
  NightOptions,
  NightSummary,
  RunName,
} from "./api.ts";
export { campaignLoads } from "./loads.ts";
export { nightIn, startNight } from "./start-night.ts";
