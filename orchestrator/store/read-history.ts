import { readFileSync } from "node:fs";
import { join } from "node:path";
import { AppError, type ChannelInfo, decodeHistory, joinHistory } from "../contract/index.ts";
import type { DataFolder } from "./data-folder.ts";

/** A run's history as it was recorded. */
export interface RunHistory {
  readonly runId: string;
  readonly attempt: number;
  readonly dtSeconds: number;
  readonly channels: readonly ChannelInfo[];
  /** Times of the samples, seconds; sample i belongs to step i + 1. */
  readonly times: Float64Array;
  /** One column a channel, in the order of `channels`. */
  readonly columns: readonly Float64Array[];
}

/**
 * Reads the whole history of a run; of its last attempt unless one is named. A campaign counts the first
 * `CampaignRun.steps` samples of it.
 *
 * @throws NOT_FOUND for an unknown run or attempt, HISTORY_DAMAGED naming file and block
 */
export async function readHistory(
  { dir, store }: Pick<DataFolder, "dir" | "store">,
  given: string,
  attemptNumber?: number,
): Promise<RunHistory> {
  const { runId, attempts } = await store.runDetail(given);
  const attempt =
    attemptNumber === undefined ? attempts.at(-1) : attempts.find((a) => a.attempt === attemptNumber);
  if (attempt === undefined)
    throw new AppError("NOT_FOUND", `run ${runId} has no attempt ${attemptNumber}`, {
      where: runId,
      fix: `It has ${attempts.length === 1 ? "attempt 1 only" : `attempts 1 to ${attempts.length}`}.`,
    });
  let next = 1;
  const pieces = (await store.historyPieces(runId, attempt.attempt)).map((piece) => {
    const { samples } = decodeHistory(readWhole(dir, piece.file), piece.file);
    if (samples.fromStep !== next || samples.times.length !== piece.toStep - next + 1)
      throw new AppError("HISTORY_DAMAGED", "a history file holds other steps than were stored", {
        where: piece.file,
        fix: "Restore the file from a copy.",
      });
    next = piece.toStep + 1;
    return samples;
  });
  const { times, columns } = joinHistory(pieces, attempt.channels.length);
  return {
    runId,
    attempt: attempt.attempt,
    dtSeconds: attempt.dtSeconds,
    channels: attempt.channels,
    times,
    columns,
  };
}

function readWhole(dir: string, file: string): Uint8Array {
  try {
    return readFileSync(join(dir, file));
  } catch (error) {
    throw new AppError("HISTORY_DAMAGED", `a history file cannot be read: ${(error as Error).message}`, {
      where: file,
      fix: "Restore the file from a copy.",
      cause: error,
    });
  }
}
