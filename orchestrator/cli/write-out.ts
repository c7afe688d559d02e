import type { OutStream } from "./cli-io.ts";

/**
 * Writes text and waits while the reader is behind. A reader that has gone away (`… | head`) is no error: the text is
 * dropped, and the exit status still says what the answer was.
 */
export async function writeOut(stream: OutStream, text: string): Promise<void> {
  if (stream.destroyed || stream.writableEnded) return;
  if (stream.write(text)) return;
  await new Promise<void>((resolve) => {
    const done = () => {
      for (const event of ["drain", "close", "error"]) stream.off(event, done);
      resolve();
    };
    for (const event of ["drain", "close", "error"]) stream.once(event, done);
  });
}

/** Prints a document as JSON, ending in a newline. */
export async function writeJson(stream: OutStream, document: unknown): Promise<void> {
  await writeOut(stream, `${JSON.stringify(document, null, 2)}\n`);
}

/** Width of the terminal behind a stream in characters; null where none is, so that lines may be as long as they like. */
export function terminalWidth(stream: OutStream): number | null {
  return stream.isTTY === true ? (stream.columns ?? 100) : null;
}
