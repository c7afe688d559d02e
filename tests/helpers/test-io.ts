import { PassThrough, Writable } from "node:stream";
import type { CliIo, OutStream } from "../../orchestrator/cli/cli-io.ts";

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
