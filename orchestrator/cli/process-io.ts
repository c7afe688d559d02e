import type { CliIo } from "./cli-io.ts";

/** Signals beyond the first that a person sends to somebody who is slow to stop, until it ends at once. */
const PATIENCE = 2;

/** The surroundings of a command that is a process of its own. */
export function processIo(): CliIo {
  return {
    stdout: process.stdout,
    stderr: process.stderr,
    stdin: process.stdin,
    env: process.env,
    cwd: process.cwd(),
    now: () => new Date(),
    onInterrupt,
  };
}

/** Lets readers that go away (`… | head`) be; what else befalls an output stream ends the process. */
export function outliveReaders(): void {
  for (const stream of [process.stdout, process.stderr])
    stream.on("error", (error: NodeJS.ErrnoException) => {
      if (error.code !== "EPIPE") process.exit(70);
    });
}

function onInterrupt(listener: () => void): () => void {
  let signals = 0;
  const hear = () => {
    signals += 1;
    // Whatever is in flight is repeated the next time: nothing committed is lost by this.
    if (signals > PATIENCE) endAtOnce();
    listener();
  };
  const names = ["SIGINT", "SIGTERM", "SIGHUP"] as const;
  for (const name of names) process.on(name, hear);
  return () => {
    for (const name of names) process.off(name, hear);
  };
}

function endAtOnce(): never {
  // Bars hide the cursor.
  if (process.stderr.isTTY) process.stderr.write("\u001b[?25h\n");
  process.exit(130);
}
