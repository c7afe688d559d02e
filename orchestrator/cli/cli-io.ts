import type { Readable, Writable } from "node:stream";

/** A stream to write on, with what a terminal tells about itself. */
export type OutStream = Writable & { readonly isTTY?: boolean; readonly columns?: number };

/** Everything a command touches of the process around it, so that tests can run commands in-process. */
export interface CliIo {
  /** Results, and nothing else. */
  readonly stdout: OutStream;
  /** Progress, warnings, errors. */
  readonly stderr: OutStream;
  readonly stdin: Readable & { readonly isTTY?: boolean };
  readonly env: Readonly<Record<string, string | undefined>>;
  readonly cwd: string;
  readonly now: () => Date;
  /** Calls back on Ctrl-C and on a request to terminate; returns what unsubscribes. */
  readonly onInterrupt: (listener: () => void) => () => void;
}

/** What a command is given: the surroundings, and the way to say that the answer is no. */
export interface CommandIo extends CliIo {
  /** Makes the exit status 1: the command worked, and its answer is no. */
  readonly answerNo: () => void;
}
