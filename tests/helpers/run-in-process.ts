import type { CliIo } from "../../orchestrator/cli/cli-io.ts";
import { runCli } from "../../orchestrator/cli/run-cli.ts";
import { Collector, testIo } from "./test-io.ts";

/** What a command line left behind: its exit status and what it printed. */
export interface Outcome {
  readonly status: number;
  readonly stdout: string;
  readonly stderr: string;
}

/** Runs a command line inside the test's own process. */
export async function runInProcess(args: readonly string[], over: Partial<CliIo> = {}): Promise<Outcome> {
  const stdout = new Collector();
  const stderr = new Collector();
  const status = await runCli(args, testIo({ stdout, stderr, ...over }));
  return { status, stdout: stdout.text, stderr: stderr.text };
}
