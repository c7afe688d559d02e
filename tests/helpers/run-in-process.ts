import { PassThrough, Writable } from "node:stream";
import type { CliIo, OutStream } from "../../orchestrator/cli/cli-io.ts";
import { runCli } from "../../orchestrator/cli/run-cli.ts";

/** What a command line left behind: its exit status and what it printed. */
export interface Outcome {
  readonly status: number;
  readonly stdout: string;
  readonly stderr: string;
}

/** A stream that keeps what is written to it. */
export class Collector extends Writable {
  text = "";
  override _write(chunk: Buffer, _encoding: string, done: () => void): void {
    this.text += chunk.toString();
    done();
  }
}

/** Surroundings for a command under test; `over` replaces parts of them. */
export function testIo(over: Partial<CliIo> = {}): CliIo & { stdout: OutStream; stderr: OutStream } {
  return {
    stdout: new Collector(),
    stderr: new Collector(),
    stdin: new PassThrough(),
    env: {},
    cwd: process.cwd(),
    now: () => new Date("2026-03-01T20:00:00Z"),
    onInterrupt: () => () => {},
    ...over,
  };
}

/** Runs a command line inside the test's own process. */
export async function runInProcess(args: readonly string[], over: Partial<CliIo> = {}): Promise<Outcome> {
  const stdout = new Collector();
  const stderr = new Collector();
  const status = await runCli(args, testIo({ stdout, stderr, ...over }));
  return { status, stdout: stdout.text, stderr: stderr.text };
}
