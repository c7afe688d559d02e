import { existsSync, statSync } from "node:fs";
import { resolve } from "node:path";
import type { Command } from "commander";
import type { Answers } from "../../api/http/index.ts";
import { AppError } from "../contract/index.ts";
import type { CliIo } from "./cli-io.ts";

/** Options of every command that works on a data folder. */
export interface DataOptions {
  readonly data?: string;
}

/** Adds the option that names the data folder. */
export function withData(command: Command): Command {
  return command.option("--data <dir>", "data folder; by default MIDWATCH_DATA, else ./midwatch-data");
}

/** The data folder as named (for messages) and as an absolute path. */
export function dataFolder(options: DataOptions, io: CliIo): { shown: string; path: string } {
  const shown = options.data ?? (io.env.MIDWATCH_DATA || "midwatch-data");
  return { shown, path: resolve(io.cwd, shown) };
}

/**
 * Asks about a data folder: over HTTP the process that holds it, or directly where none does.
 *
 * @throws NOT_FOUND where there is no such folder, DATA_FOLDER_BUSY where its holder does not answer
 */
export async function withAnswers<T>(
  options: DataOptions,
  io: CliIo,
  ask: (answers: Answers) => Promise<T>,
): Promise<T> {
  const answers = await openAnswers(options, io);
  try {
    return await ask(answers);
  } finally {
    await answers.close();
  }
}

async function openAnswers(options: DataOptions, io: CliIo): Promise<Answers> {
  const { shown, path } = dataFolder(options, io);
  requireFolder(shown, path);
  const [{ readServerFile }, { answersAt, folderAnswers, remoteAnswers }] = await Promise.all([
    import("../store/server-file.ts"),
    import("../../api/http/index.ts"),
  ]);
  const server = readServerFile(path);
  if (server !== null) {
    const holder = { ...server, host: "127.0.0.1" };
    if (await answersAt(holder)) return remoteAnswers(holder);
  }
  const { openDataFolder } = await import("../store/open-data-folder.ts");
  const folder = await openDataFolder(path, {
    onNotice: (words) => io.stderr.write(`${words}\n`),
    now: () => io.now().getTime(),
  });
  return { ...folderAnswers(folder, () => null), close: () => folder.close() };
}

function requireFolder(shown: string, path: string): void {
  if (existsSync(path) && statSync(path).isDirectory()) return;
  throw new AppError(
    "NOT_FOUND",
    existsSync(path) ? `${shown} is a file, not a data folder` : `there is no data folder ${shown}`,
    {
      where: path,
      fix: "Name the folder in which the campaign was launched with --data or MIDWATCH_DATA, or launch a campaign first.",
    },
  );
}
