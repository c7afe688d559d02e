// Statistics of time histories: is a run still sound, may its average be used, and how well is it known.
// Pure functions over plain arrays, no files and no clock. estimators/ measures, mean/ judges, onset/ watches for trouble.
// Read judge-history.ts first, then mean/judge-stretch.ts.
export * from "./estimators/index.ts";
export type { TimedHistory } from "./even-history.ts";
export { judgeBesideOnset } from "./judge-beside-onset.ts";
export { type JudgeHistoryOptions, judgeHistory } from "./judge-history.ts";
export * from "./mean/index.ts";
export * from "./onset/index.ts";
