import { closeSync, fdatasyncSync, mkdirSync, openSync, readFileSync, rmSync, writeSync } from "node:fs";
import { dirname, join } from "node:path";
import {
  AppError,
  decodeHistory,
  encodeHistoryBlock,
  encodeHistoryEnd,
  encodeHistoryHead,
  type HistoryHead,
  type HistoryPiece,
  type HistorySamples,
} from "../orchestrator/contract/index.ts";

/** Rows a block: small enough that damage costs little, large enough that heads cost nothing. */
const BLOCK_ROWS = 1024;

/**
 * Writes a stretch of history as a new file and returns its size in bytes. The samples are on the disk before the end
 * mark is written, so that a file with an end mark is whole. On an error nothing is left.
 */
export function writeHistoryFile(path: string, head: HistoryHead, samples: HistorySamples): number {
  mkdirSync(dirname(path), { recursive: true });
  // wx: a file that is there already belongs to somebody else.
  const file = openSync(path, "wx", 0o600);
  try {
    let bytes = writeAll(file, encodeHistoryHead(head));
    for (let from = 0; from < samples.times.length; from += BLOCK_ROWS) {
      const to = Math.min(from + BLOCK_ROWS, samples.times.length);
      bytes += writeAll(
        file,
        encodeHistoryBlock({
          fromStep: samples.fromStep + from,
          times: samples.times.subarray(from, to),
          columns: samples.columns.map((column) => column.subarray(from, to)),
        }),
      );
    }
    fdatasyncSync(file);
    bytes += writeAll(file, encodeHistoryEnd(samples.times.length));
    fdatasyncSync(file);
    closeSync(file);
    return bytes;
  } catch (error) {
    closeSync(file);
    rmSync(path, { force: true });
    throw error;
  }
}

/** A write may take less than it was given: on a nearly full disk it does. */
function writeAll(file: number, bytes: Uint8Array): number {
  for (let at = 0; at < bytes.length; ) at += writeSync(file, bytes, at, bytes.length - at);
  return bytes.length;
}

/**
 * Reads the pieces of a history, which must follow each other from step 1.
 *
 * @throws HISTORY_DAMAGED naming file and block
 */
export function readHistoryPieces(
  folder: string,
  pieces: readonly HistoryPiece[],
  channels: readonly string[],
): HistorySamples[] {
  let next = 1;
  return pieces.map((piece) => {
    const { head, samples } = decodeHistory(readPiece(folder, piece), piece.file);
    const wrong = [
      [
        piece.fromStep === next && samples.fromStep === next,
        `it begins at step ${samples.fromStep}, not ${next}`,
      ],
      [
        samples.times.length === piece.toStep - piece.fromStep + 1,
        `it holds ${samples.times.length} samples`,
      ],
      [head.channels.join() === channels.join(), "its channels are not those of the solver"],
    ].find(([fine]) => fine !== true);
    if (wrong !== undefined)
      throw new AppError("HISTORY_DAMAGED", `a history file does not fit its run: ${wrong[1]}`, {
        where: piece.file,
        fix: "Restore the file from a copy.",
      });
    next = piece.toStep + 1;
    return samples;
  });
}

function readPiece(folder: string, piece: HistoryPiece): Uint8Array {
  try {
    return readFileSync(join(folder, piece.file));
  } catch (error) {
    throw new AppError("HISTORY_DAMAGED", `a history file cannot be read: ${(error as Error).message}`, {
      where: piece.file,
      fix: "Restore the file from a copy.",
      cause: error,
    });
  }
}
