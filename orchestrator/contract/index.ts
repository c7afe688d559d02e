// The shared words of midwatch: error codes, verdicts, channels, judgements, cases, campaigns, leg messages.
// Everything here is data and zod; nothing here acts. Start with verdict.ts, then judgement.ts.
export { AppError, ERROR_CODES, type ErrorCode } from "./app-error.ts";
export { CAUTION } from "./caution.ts";
export type { ChannelInfo, DeclaredPeriod } from "./channel.ts";
export type {
  AveragingWindow,
  ChannelJudgement,
  FoundPeriod,
  HistoryJudgement,
  Onset,
  OnsetKind,
  TestResult,
} from "./judgement.ts";
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
