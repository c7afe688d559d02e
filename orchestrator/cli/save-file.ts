import { randomBytes } from "node:crypto";
import { access, link, open, rename, rm } from "node:fs/promises";
import { dirname, resolve } from "node:path";
import { AppError } from "../contract/index.ts";

/**
 * Writes a result to a file, whole or not at all: into a temporary file beside it, then under its name. A file that is
 * there is only replaced with `force`.
 *
 * @throws STATE_CONFLICT where the file exists, FILE_NOT_FOUND, FILE_UNREADABLE, DISK_FULL
 */
export async function saveFile(
  shown: string,
  content: Iterable<string> | AsyncIterable<string>,
  options: { cwd: string; force: boolean },
): Promise<void> {
  const path = resolve(options.cwd, shown);
  if (!options.force && (await exists(path))) throw taken(shown);
  const temporary = resolve(dirname(path), `.midwatch-${randomBytes(6).toString("hex")}.part`);
  try {
    await writeWhole(temporary, content);
    await publish(temporary, path, options.force);
  } catch (error) {
    throw saveFailure(error, shown);
  }
}

async function writeWhole(path: string, content: Iterable<string> | AsyncIterable<string>): Promise<void> {
  const file = await open(path, "wx");
  try {
    for await (const text of content) await file.write(text);
    await file.sync();
  } catch (error) {
    await rm(path, { force: true });
    throw error;
  } finally {
    await file.close();
  }
}

/** Gives the finished file its name. A link fails where a rename would replace a file that appeared in the meantime. */
async function publish(temporary: string, path: string, force: boolean): Promise<void> {
  try {
    if (force || !(await linked(temporary, path))) await rename(temporary, path);
  } finally {
    await rm(temporary, { force: true });
  }
}

/** False on file systems that have no links. */
async function linked(from: string, to: string): Promise<boolean> {
  try {
    await link(from, to);
    return true;
  } catch (error) {
    const code = error instanceof Error && "code" in error ? String(error.code) : "";
    if (["EPERM", "ENOTSUP", "EOPNOTSUPP", "ENOSYS"].includes(code)) return false;
    throw error;
  }
}

const WHY_NOT: Readonly<Record<string, readonly [what: string, fix: string]>> = {
  ENOENT: ["its folder does not exist", "Make the folder first, or name another one."],
  ENOTDIR: ["part of its path is a file", "Name another path."],
  EISDIR: ["it is a folder", "Name a file in it."],
  EACCES: ["you are not allowed to write there", "Name a folder that you may write to."],
  EPERM: ["you are not allowed to write there", "Name a folder that you may write to."],
  EROFS: ["that disk can only be read", "Name a folder that you may write to."],
  ENAMETOOLONG: ["the name is too long", "Name a shorter one."],
};

async function exists(path: string): Promise<boolean> {
  return access(path).then(
    () => true,
    () => false,
  );
}

function taken(shown: string): AppError {
  return new AppError("STATE_CONFLICT", `${shown} is there already`, {
    where: shown,
    fix: "Name another file, or replace this one with --force.",
  });
}

function saveFailure(error: unknown, shown: string): unknown {
  const code = error instanceof Error && "code" in error ? error.code : undefined;
  if (code === "EEXIST") return taken(shown);
  const why = typeof code === "string" ? WHY_NOT[code] : undefined;
  if (why !== undefined)
    return new AppError("USAGE", `cannot write ${shown}: ${why[0]}`, {
      where: shown,
      fix: why[1],
      cause: error,
    });
  // A full disk is told by report-failure.ts, wherever it strikes.
  return error;
}
