#!/usr/bin/env node
// The command line: parse, call, report. run-cli.ts puts the commands together, commands/ has one file a command,
// cli-io.ts is all that a command sees of the process. Read run-cli.ts first.
import type { CliIo } from "./cli-io.ts";
import { runCli } from "./run-cli.ts";

/** A reader that has gone away is no failure of ours; anything else about an output stream is. */
for (const stream of [process.stdout, process.stderr])
  stream.on("error", (error: NodeJS.ErrnoException) => {
    if (error.code !== "EPIPE") process.exit(70);
  });

const io: CliIo = {
  stdout: process.stdout,
  stderr: process.stderr,
  stdin: process.stdin,
  env: process.env,
  cwd: process.cwd(),
  now: () => new Date(),
  onInterrupt,
};

/** Signals beyond the first that a person sends to somebody who is slow to stop, until it ends at once. */
const PATIENCE = 2;

function onInterrupt(listener: () => void): () => void {
  let signals = 0;
  const hear = () => {
    signals += 1;
    // Whatever is in flight is repeated the next time: nothing committed is lost by this.
    if (signals > PATIENCE) {
      // Bars hide the cursor.
      if (process.stderr.isTTY) process.stderr.write("\u001b[?25h\n");
      process.exit(130);
    }
    listener();
  };
  const names = ["SIGINT", "SIGTERM", "SIGHUP"] as const;
  for (const name of names) process.on(name, hear);
  return () => {
    for (const name of names) process.off(name, hear);
  };
}

const status = await runCli(process.argv.slice(2), io);
await new Promise<void>((resolve) => process.stdout.write("", () => resolve()));
process.exit(status);
