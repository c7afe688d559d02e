// The shared words of midwatch: error codes, verdicts, channels, judgements, cases, campaigns, leg messages.
// Everything here is data and zod; nothing here acts. Start with verdict.ts, then judgement.ts.
export { AppError, ERROR_CODES, type ErrorCode } from "./app-error.ts";
export { CAUTION } from "./caution.ts";
export type { ChannelInfo, DeclaredPeriod } from "./channel.ts";
export { crc32 } from "./crc32.ts";
export {
  decodeHistory,
  encodeHistoryBlock,
  encodeHistoryEnd,
  encodeHistoryHead,
  type HistoryHead,
  type HistorySamples,
  joinHistory,
} from "./history-format.ts";
export type {
  AveragingWindow,
  ChannelJudgement,
  FoundPeriod,
  HistoryJudgement,
  Onset,
  OnsetKind,
  TestResult,
} from "./judgement.ts";
export {
  type CheckpointPiece,
  type HistoryPiece,
  type LegOrder,
  toChildSchema,
} from "./leg-order.ts";
export {
  fromChildSchema,
  type LegOutcome,
  type LegProgress,
  type LegReport,
} from "./leg-report.ts";
export type { LegEnding, LegRunner } from "./leg-runner.ts";
export type {
  AcceptRule,
  OnsetRule,
  Plan,
  PlannedRun,
  Remedy,
  RunRole,
  Tolerance,
} from "./plan.ts";
export type { Simulation } from "./simulation.ts";
export { VERDICTS, type Verdict } from "./verdict.ts";
