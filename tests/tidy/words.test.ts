import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { expect, it } from "vitest";
import { ERROR_CODES } from "../../orchestrator/contract/index.ts";
import { projectRoot, sourceTree } from "./source-tree.ts";

const skipped = new Set(["node_modules", "dist", ".git", "coverage", "midwatch-data", ".midwatch"]);

function filesBelow(dir: string): string[] {
  return readdirSync(join(projectRoot, dir), { withFileTypes: true }).flatMap((entry) => {
    if (skipped.has(entry.name)) return [];
    const path = join(dir, entry.name);
    return entry.isDirectory() ? filesBelow(path) : [path];
  });
}

it("stands alone: no file points outside the project or at an absolute path of one machine", () => {
  const text = filesBelow("").filter(
    (f) => /\.(ts|md|json|ya?ml|mjs|sql|html)$/.test(f) && !f.endsWith("words.test.ts"),
  );
  const pointing = text.filter((f) => {
    const content = readFileSync(join(projectRoot, f), "utf8");
    return /\.\.\/shared\b|\.library\b|\/work\/|bash_jobs/.test(content);
  });
  expect(pointing).toEqual([]);
});

it("opens every folder of several files with an entry comment", () => {
  const { files } = sourceTree();
  const entries = files.filter((f) => f.endsWith("/index.ts"));
  expect(entries.length).toBeGreaterThan(2);
  const silent = entries.filter((f) => !readFileSync(join(projectRoot, f), "utf8").startsWith("// "));
  expect(silent).toEqual([]);
});

it("uses every error code somewhere, and only codes of the table", () => {
  const source = sourceTree()
    .files.filter((f) => !f.endsWith("app-error.ts"))
    .map((f) => readFileSync(join(projectRoot, f), "utf8"))
    .join("\n");
  const unused = Object.keys(ERROR_CODES).filter((code) => !source.includes(`"${code}"`));
  expect(unused).toEqual([]);
});
