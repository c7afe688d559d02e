// May the average of one channel be used, and how well is it known: start-up, stationarity, mean and half-width.
// Not here: whether the run is sound (onset/). Read judge-record.ts first, then judge-stretch.ts and judge-noisy.ts.
export type { JudgeOptions } from "./judge-options.ts";
export { judgeRecord } from "./judge-record.ts";
export { nextLookLength } from "./look-schedule.ts";
export { essentialPeriods } from "./reduce-series.ts";
