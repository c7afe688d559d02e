import { createInterface } from "node:readline/promises";
import type { CliIo } from "./cli-io.ts";

/** Asks a yes-or-no question on a terminal; no answer is a no. */
export async function askPerson(question: string, io: CliIo): Promise<boolean> {
  const lines = createInterface({ input: io.stdin, output: io.stderr });
  try {
    const answer = await lines.question(`${question} [y/N] `);
    return /^y(es)?$/i.test(answer.trim());
  } finally {
    lines.close();
  }
}

/** Whether somebody is there to be asked. */
export function personIsThere(io: CliIo): boolean {
  return io.stdin.isTTY === true && io.stderr.isTTY === true;
}
