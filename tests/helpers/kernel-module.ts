import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { main } from "assemblyscript/asc";
import { projectRoot } from "../tidy/source-tree.ts";

let compiled: Promise<Uint8Array> | undefined;

/** The kernel's module, compiled from today's source with the flags of `npm run build:kernel`, once a process. */
export function kernelModule(): Promise<Uint8Array> {
  compiled ??= compile();
  return compiled;
}

async function compile(): Promise<Uint8Array> {
  const folder = mkdtempSync(join(tmpdir(), "midwatch-kernel-"));
  try {
    const scripts = JSON.parse(readFileSync(join(projectRoot, "package.json"), "utf8")).scripts;
    const words = String(scripts["build:kernel"]).split(/\s+/).slice(1);
    const sources = words.filter((word) => word.endsWith(".ts")).map((path) => join(projectRoot, path));
    const flags = words.filter((word) => !word.endsWith(".ts"));
    const target = join(folder, "lattice.wasm");
    flags[flags.indexOf("-o") + 1] = target;
    const { error, stderr } = await main([...sources, ...flags, "--baseDir", "/"]);
    if (error !== null)
      throw new Error(`the kernel does not compile: ${stderr.toString()}`, { cause: error });
    return new Uint8Array(readFileSync(target));
  } finally {
    rmSync(folder, { recursive: true });
  }
}
