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
  onInterrupt: (listener) => {
    const signals = ["SIGINT", "SIGTERM", "SIGHUP"] as const;
    for (const signal of signals) process.on(signal, listener);
    return () => {
      for (const signal of signals) process.off(signal, listener);
    };
  },
};

const status = await runCli(process.argv.slice(2), io);
await new Promise<void>((resolve) => process.stdout.write("", () => resolve()));
process.exit(status);
