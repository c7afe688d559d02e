import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import type { Response } from "express";

const TYPES = { csv: "text/csv; charset=utf-8", json: "application/json; charset=utf-8" } as const;

/** Sends text as it is made, no faster than it is taken. */
export async function sendText(
  response: Response,
  format: keyof typeof TYPES,
  text: Iterable<string> | AsyncIterable<string>,
): Promise<void> {
  response.type(TYPES[format]);
  try {
    await pipeline(Readable.from(text), response);
  } catch (error) {
    // The asker has hung up; nobody is left to be told.
    if (error instanceof Error && "code" in error && error.code === "ERR_STREAM_PREMATURE_CLOSE") return;
    throw error;
  }
}
