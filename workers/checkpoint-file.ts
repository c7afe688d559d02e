import {
  closeSync,
  fsyncSync,
  mkdirSync,
  openSync,
  readFileSync,
  renameSync,
  rmSync,
  writeSync,
} from "node:fs";
import { dirname, join } from "node:path";
import { AppError, type CheckpointPiece, crc32 } from "../orchestrator/contract/index.ts";

/** Writes a state whole or not at all: aside, synced, then renamed. */
export function writeCheckpointFile(
  folder: string,
  file: string,
  state: { readonly bytes: Uint8Array; readonly step: number },
): CheckpointPiece {
  const path = join(folder, file);
  const aside = `${path}.aside`;
  mkdirSync(dirname(path), { recursive: true });
  const handle = openSync(aside, "w", 0o600);
  try {
    for (let at = 0; at < state.bytes.length; )
      at += writeSync(handle, state.bytes, at, state.bytes.length - at);
    fsyncSync(handle);
    closeSync(handle);
  } catch (error) {
    closeSync(handle);
    rmSync(aside, { force: true });
    throw error;
  }
  renameSync(aside, path);
  return { file, step: state.step, bytes: state.bytes.length, crc: crc32(state.bytes) };
}

/**
 * Reads a state back.
 *
 * @throws CHECKPOINT_DAMAGED when it is not what was written
 */
export function readCheckpointFile(folder: string, piece: CheckpointPiece): Uint8Array {
  let bytes: Uint8Array;
  try {
    // A copy with a buffer of its own: a Buffer may be a view into one that it shares.
    bytes = new Uint8Array(readFileSync(join(folder, piece.file)));
  } catch (error) {
    throw damaged(piece, (error as Error).message, error);
  }
  if (bytes.length !== piece.bytes)
    throw damaged(piece, `it holds ${bytes.length} bytes, ${piece.bytes} were written`);
  if (crc32(bytes) !== piece.crc) throw damaged(piece, "the check sum is wrong");
  return bytes;
}

function damaged(piece: CheckpointPiece, what: string, cause?: unknown): AppError {
  return new AppError("CHECKPOINT_DAMAGED", `the saved state at step ${piece.step} is damaged: ${what}`, {
    where: piece.file,
    fix: "Restore the file from a copy.",
    cause,
  });
}
