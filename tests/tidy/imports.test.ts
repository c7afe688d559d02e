import { existsSync, readdirSync } from "node:fs";
import { builtinModules } from "node:module";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { FOLDERS, ZONES } from "./import-zones.ts";
import { type ImportEdge, importsOf, projectRoot, sourceTree } from "./source-tree.ts";

const zoneOf = (path: string): string | undefined =>
  Object.keys(ZONES)
    .filter((zone) => path.startsWith(`${zone}/`))
    .sort((a, b) => b.length - a.length)[0];

const packageOf = (specifier: string): string =>
  specifier
    .split("/")
    .slice(0, specifier.startsWith("@") ? 2 : 1)
    .join("/");

function refusal(edge: ImportEdge): string | null {
  const from = zoneOf(edge.file);
  if (from === undefined) return `${edge.file} lies in no zone`;
  const zone = ZONES[from]!;
  const at = `${edge.file} imports ${edge.specifier}`;
  if (edge.specifier.startsWith("node:")) return zone.node ? null : `${at}: ${from} uses no node: module`;
  if (builtinModules.includes(edge.specifier)) return `${at}: write node:${edge.specifier}`;
  if (edge.target === null) {
    if (zone.npm === "*" || zone.npm.includes(packageOf(edge.specifier))) return null;
    return `${at}: ${from} may not use this package`;
  }
  if (!existsSync(join(projectRoot, edge.target))) return `${at}: there is no such file`;
  const to = zoneOf(edge.target);
  if (to === undefined) return `${at}: outside every zone`;
  if (to === from) return null;
  if (!zone.imports.includes(to)) return `${at}: ${from} may not import ${to}`;
  if (zone.typeOnly?.includes(to) && !edge.typeOnly) return `${at}: only import type is allowed`;
  return null;
}

describe("the way is one way", () => {
  const { folders, files } = sourceTree();
  const edges = files.flatMap(importsOf);

  it("sees the imports at all", () => {
    expect(files.length).toBeGreaterThan(5);
    expect(edges.length).toBeGreaterThan(5);
  });

  it("imports only what the table of zones allows", () => {
    expect(edges.map(refusal).filter((line) => line !== null)).toEqual([]);
  });

  it("has no folder that the table does not name", () => {
    expect(folders.filter((folder) => !FOLDERS.includes(folder))).toEqual([]);
  });

  it("keeps BullMQ inside the queue folder", () => {
    const strangers = edges.filter(
      (e) => e.specifier === "bullmq" && !e.file.startsWith("orchestrator/queue/"),
    );
    expect(strangers.map((e) => e.file)).toEqual([]);
  });

  it("keeps the top level to what was agreed", () => {
    const agreed = new Set(
      (
        "api checks docs examples orchestrator tests workers CHANGELOG.md DEVELOPERS.md LICENSE README.md biome.json " +
        "docker-compose.yml Dockerfile knip.json package-lock.json package.json tsconfig.build.json tsconfig.json vitest.config.ts"
      ).split(" "),
    );
    const stray = readdirSync(projectRoot, { withFileTypes: true })
      .map((entry) => entry.name)
      .filter(
        (name) =>
          !name.startsWith(".") && !["node_modules", "dist", "coverage", "midwatch-data"].includes(name),
      )
      .filter((name) => !agreed.has(name));
    expect(stray).toEqual([]);
  });

  it("refuses a forbidden import when there is one", () => {
    const edge = {
      file: "checks/x.ts",
      specifier: "../workers/y.ts",
      target: "workers/y.ts",
      typeOnly: false,
    };
    expect(refusal(edge)).toContain("no such file");
    expect(refusal({ ...edge, specifier: "node:fs", target: null })).toContain("node:");
    expect(refusal({ ...edge, specifier: "express", target: null })).toContain("package");
    const real = files.find((f) => f.startsWith("workers/"));
    if (real !== undefined)
      expect(refusal({ ...edge, specifier: `../${real}`, target: real })).toContain("may not import");
  });
});
