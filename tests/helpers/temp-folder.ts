import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll } from "vitest";

/** A folder of its own for a test file, removed when its tests are done. */
export function tempFolder(): {
  path: string;
  write: (name: string, content: string | Uint8Array) => string;
} {
  const path = mkdtempSync(join(tmpdir(), "midwatch-test-"));
  afterAll(() => rmSync(path, { recursive: true, force: true }));
  return {
    path,
    write: (name, content) => {
      const file = join(path, name);
      writeFileSync(file, content);
      return file;
    },
  };
}
