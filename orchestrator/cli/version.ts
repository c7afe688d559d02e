import { existsSync, readFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { AppError } from "../contract/index.ts";

/** The version in package.json, found by going up from this file: the depth differs between source and build. */
export function version(): string {
  for (let dir = dirname(fileURLToPath(import.meta.url)); dir !== dirname(dir); dir = dirname(dir)) {
    const path = join(dir, "package.json");
    if (!existsSync(path)) continue;
    const content: unknown = JSON.parse(readFileSync(path, "utf8"));
    if (typeof content === "object" && content !== null && "version" in content)
      return String(content.version);
  }
  throw new AppError("BUG", "package.json was not found above the program's own files");
}
