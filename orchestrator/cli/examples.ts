import type { Command } from "commander";

/** Adds worked examples to a command's help. Every command has at least one. */
export function withExamples(
  command: Command,
  examples: readonly (readonly [line: string, what: string])[],
): Command {
  const lines = examples.map(([line, what]) => `  $ ${line}\n      ${what}`);
  return command.addHelpText("after", `\nExamples:\n${lines.join("\n")}`);
}
