#!/usr/bin/env node
// The command line: parse, call, report. run-cli.ts puts the commands together, commands/ has one file a command,
// cli-io.ts is all that a command sees of the process. Read run-cli.ts first.
import { outliveReaders, processIo } from "./process-io.ts";
import { runCli } from "./run-cli.ts";

outliveReaders();
const status = await runCli(process.argv.slice(2), processIo());
await new Promise<void>((resolve) => process.stdout.write("", () => resolve()));
process.exit(status);
