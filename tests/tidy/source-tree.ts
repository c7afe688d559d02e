import { readdirSync, readFileSync } from "node:fs";
import { dirname, join, posix } from "node:path";
import { fileURLToPath } from "node:url";
import { ROOTS } from "./import-zones.ts";

/** The project's own folder. */
export const projectRoot = join(dirname(fileURLToPath(import.meta.url)), "..", "..");

/** One import of one file: what it names, and whether only types come in. */
export interface ImportEdge {
  readonly file: string;
  readonly specifier: string;
  /** Project path for a relative import, null for a package or a node: module. */
  readonly target: string | null;
  readonly typeOnly: boolean;
}

/** Folders and TypeScript files below the source roots, as project paths with forward slashes. */
export function sourceTree(): { folders: string[]; files: string[] } {
  const folders: string[] = [];
  const files: string[] = [];
  const walk = (dir: string) => {
    folders.push(dir);
    for (const entry of readdirSync(join(projectRoot, dir), { withFileTypes: true })) {
      const path = posix.join(dir, entry.name);
      if (entry.isDirectory()) walk(path);
      else if (/\.tsx?$/.test(entry.name)) files.push(path);
    }
  };
  for (const root of ROOTS) walk(root);
  return { folders, files };
}

const IMPORT =
  /(?:^|\n)\s*(import|export)\s+(type\s+)?(?:[^;'"]*?\sfrom\s+)?["']([^"']+)["']|import\(\s*["']([^"']+)["']\s*\)/g;

/** Every import and re-export of a file, static and dynamic. */
export function importsOf(file: string): ImportEdge[] {
  const text = readFileSync(join(projectRoot, file), "utf8");
  const edges: ImportEdge[] = [];
  for (const match of text.matchAll(IMPORT)) {
    const specifier = match[3] ?? match[4];
    if (specifier === undefined) continue;
    const target = specifier.startsWith(".")
      ? posix.normalize(posix.join(posix.dirname(file), specifier))
      : null;
    edges.push({ file, specifier, target, typeOnly: match[2] !== undefined });
  }
  return edges;
}
