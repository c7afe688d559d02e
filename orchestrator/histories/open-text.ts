import { createReadStream } from "node:fs";
import { PassThrough, type Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { createGunzip } from "node:zlib";
import { AppError } from "../contract/index.ts";
import { fileFailure } from "./file-failure.ts";

const CHUNK_BYTES = 1 << 20;

/**
 * The text of a file in chunks, whatever it is stored as: plain or gzip (told by content, not by name), UTF-8 or UTF-16,
 * with or without a byte-order mark.
 *
 * @throws FILE_NOT_FOUND, FILE_UNREADABLE
 */
export async function* openText(path: string, shown: string): AsyncGenerator<string> {
  const source = createReadStream(path, { highWaterMark: CHUNK_BYTES });
  try {
    yield* decode(await unpacked(source), shown);
  } catch (error) {
    throw error instanceof AppError ? error : fileFailure(error, shown);
  } finally {
    source.destroy();
  }
}

/** The bytes of a stream, unzipped if they begin as gzip does. */
async function unpacked(source: Readable): Promise<AsyncIterable<Buffer>> {
  const chunks: AsyncIterator<Buffer> = source[Symbol.asyncIterator]();
  const first = await chunks.next();
  const head = first.done === true ? Buffer.alloc(0) : first.value;
  const whole = prepend(head, chunks);
  if (head[0] !== 0x1f || head[1] !== 0x8b) return whole;
  const plain = new PassThrough({ readableHighWaterMark: CHUNK_BYTES });
  // A failure of the source or of the unzipping destroys `plain`, so that its reader gets the error.
  pipeline(whole, createGunzip({ chunkSize: CHUNK_BYTES }), plain).catch(() => {});
  return plain;
}

async function* prepend(head: Buffer, rest: AsyncIterator<Buffer>): AsyncGenerator<Buffer> {
  yield head;
  for (let next = await rest.next(); next.done !== true; next = await rest.next()) yield next.value;
}

async function* decode(bytes: AsyncIterable<Buffer>, shown: string): AsyncGenerator<string> {
  let decoder: InstanceType<typeof TextDecoder> | null = null;
  for await (const chunk of bytes) {
    if (decoder === null) {
      const encoding = encodingOf(chunk);
      if (encoding === "utf-8" && chunk.includes(0))
        throw new AppError("FILE_UNREADABLE", `${shown} holds binary data, not text`, {
          where: shown,
          fix: "Export the history as CSV: a header line with names, then one line of numbers a time step.",
        });
      decoder = new TextDecoder(encoding);
    }
    yield decoder.decode(chunk, { stream: true });
  }
  if (decoder !== null) yield decoder.decode();
}

function encodingOf(head: Buffer): "utf-8" | "utf-16le" | "utf-16be" {
  if (head[0] === 0xff && head[1] === 0xfe) return "utf-16le";
  if (head[0] === 0xfe && head[1] === 0xff) return "utf-16be";
  return "utf-8";
}
