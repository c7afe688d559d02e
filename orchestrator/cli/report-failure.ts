import { CommanderError } from "commander";
import { AppError, ERROR_CODES } from "../contract/index.ts";
import type { OutStream } from "./cli-io.ts";

/** Prints what went wrong, where, and what to do; returns the exit status. A stack trace only for bugs. */
export function reportFailure(error: unknown, stderr: OutStream): number {
  const known = knownFailure(error);
  const lines = [`midwatch: ${known.message}`];
  if (known.where !== undefined) lines.push(`  where: ${known.where}`);
  if (known.fix !== undefined) lines.push(`  to do: ${known.fix}`);
  lines.push(`  code:  ${known.code}`);
  if (known.code === "BUG") lines.push(stackOf(known));
  stderr.write(`${lines.join("\n")}\n`);
  return ERROR_CODES[known.code].exit;
}

function knownFailure(error: unknown): AppError {
  if (error instanceof AppError) return error;
  if (error instanceof CommanderError) return wrongUse(error);
  const systemCode = error instanceof Error && "code" in error ? error.code : undefined;
  if (systemCode === "ENOSPC" || systemCode === "EDQUOT")
    return new AppError("DISK_FULL", "the disk is full", {
      where: (error as Error).message,
      fix: "Free some space, or name another folder with --data, and give the same command again.",
      cause: error,
    });
  return new AppError(
    "BUG",
    `unexpected failure: ${error instanceof Error ? error.message : String(error)}`,
    {
      fix: "This is a fault in midwatch. Please report it with the lines below and the command that you gave.",
      cause: error,
    },
  );
}

/** Turns the argument parser's complaint into ours: its first line says what, its hint says what to do. */
function wrongUse(error: CommanderError): AppError {
  const [first = "", ...rest] = error.message.split("\n");
  const hint = rest.join(" ").trim().replace(/^\(/, "").replace(/\)$/, "");
  const help = "midwatch --help lists the commands, midwatch COMMAND --help the options of one.";
  return new AppError("USAGE", first.replace(/^error: /, ""), {
    fix: hint === "" ? help : `${hint} ${help}`,
  });
}

function stackOf(bug: AppError): string {
  const root = bug.cause instanceof Error ? bug.cause : bug;
  return root.stack ?? String(root);
}
