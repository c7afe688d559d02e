import { readFile, stat } from "node:fs/promises";
import { AppError } from "../contract/index.ts";
import { type Campaign, parseCampaign } from "./parse-campaign.ts";
import { YAML_LIMITS } from "./parse-yaml.ts";

/**
 * Reads a campaign file.
 *
 * @param shown what messages call the file, if not by its path
 * @throws FILE_NOT_FOUND, FILE_UNREADABLE (a folder, not UTF-8, no permission), TOO_LARGE, and what parseCampaign throws
 */
export async function readCampaign(path: string, shown = path): Promise<Campaign> {
  const bytes = await readBytes(path, shown);
  let text: string;
  try {
    // A byte-order mark at the start is taken off by the decoder.
    text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch (cause) {
    throw new AppError("FILE_UNREADABLE", `the file is not text in UTF-8${encodingHint(bytes)}`, {
      where: shown,
      fix: "Save it as UTF-8 in your editor. A campaign file is YAML or JSON.",
      cause,
    });
  }
  return parseCampaign(text, shown);
}

async function readBytes(path: string, shown: string): Promise<Uint8Array> {
  try {
    const info = await stat(path);
    if (info.isDirectory())
      throw new AppError("FILE_UNREADABLE", "this is a folder, not a campaign file", {
        where: shown,
        fix: "Name the campaign file inside it.",
      });
    // A device or pipe has no size and may have no end.
    if (!info.isFile())
      throw new AppError("FILE_UNREADABLE", "this is no regular file", {
        where: shown,
        fix: "Save the campaign to a file and name that.",
      });
    // Each character takes up to four bytes; anything longer is refused before it is read.
    if (info.size > 4 * YAML_LIMITS.characters)
      throw new AppError("TOO_LARGE", `the file has ${info.size} bytes`, {
        where: shown,
        fix: `A campaign file has at most ${YAML_LIMITS.characters} characters: is this the right file?`,
      });
    return await readFile(path);
  } catch (error) {
    if (error instanceof AppError) throw error;
    throw unreadable(shown, error as NodeJS.ErrnoException);
  }
}

function unreadable(shown: string, cause: NodeJS.ErrnoException): AppError {
  if (cause.code === "ENOENT" || cause.code === "ENOTDIR")
    return new AppError("FILE_NOT_FOUND", "there is no such file", {
      where: shown,
      fix: "Check the path. examples/first-campaign.yaml is a small one to begin with.",
      cause,
    });
  return new AppError("FILE_UNREADABLE", `the file cannot be read (${cause.code ?? cause.message})`, {
    where: shown,
    fix: "Check its permissions.",
    cause,
  });
}

/** Every second byte zero is the look of UTF-16, which some editors call Unicode. */
function encodingHint(bytes: Uint8Array): string {
  const marked = (bytes[0] === 0xff && bytes[1] === 0xfe) || (bytes[0] === 0xfe && bytes[1] === 0xff);
  return marked ? " (it looks like UTF-16)" : "";
}
