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

/** What a command is given: the surroundings, and the way to end with another status than 0 without an error. */
export interface CommandIo extends CliIo {
  /** 1: the command worked, and its answer is no. 2: part of the input was bad, and has been reported. 75: to be gone on with. */
  readonly exitWith: (status: 1 | 2 | 75) => void;
}
