import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { loadKernel } from "../../../workers/load-kernel.ts";
import { MIXED_KERNEL_NAME, typescriptKernel } from "../../../workers/model/kernel/index.ts";
import { kernelModule } from "../../helpers/kernel-module.ts";

let folder: string;
let good: string;
beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), "midwatch-load-kernel-"));
  good = join(folder, "lattice.wasm");
  writeFileSync(good, await kernelModule());
});
afterAll(() => rmSync(folder, { recursive: true }));

const file = (name: string, content: Uint8Array): string => {
  const path = join(folder, name);
  writeFileSync(path, content);
  return path;
};

describe("loading the kernel", () => {
  it("takes mixed precision for a new case, and says so", () => {
    const { kernel, notice } = loadKernel({ paths: [join(folder, "absent"), good] });
    expect(kernel.name).toBe(MIXED_KERNEL_NAME);
    expect(notice).toBe("mixed precision, WebAssembly");
  });

  it("goes on in double precision where a case was begun so, compiled or not: the bits are the same", () => {
    const compiled = loadKernel({ name: typescriptKernel.name, paths: [good] });
    expect(compiled.kernel.name).toBe(typescriptKernel.name);
    expect(compiled.kernel).not.toBe(typescriptKernel);
    const plain = loadKernel({ name: typescriptKernel.name, paths: [] });
    expect(plain.kernel).toBe(typescriptKernel);
  });

  it("falls back to TypeScript without the module, and says what is missing and what to run", () => {
    const { kernel, notice } = loadKernel({ paths: [join(folder, "absent")] });
    expect(kernel).toBe(typescriptKernel);
    expect(notice).toMatch(/plain TypeScript.*no compiled kernel at .*absent.*npm run build:kernel/);
  });

  it("falls back when the file is no module", () => {
    const { kernel, notice } = loadKernel({ paths: [file("torn.wasm", new Uint8Array([0, 97, 115]))] });
    expect(kernel).toBe(typescriptKernel);
    expect(notice).toMatch(/torn.wasm does not load/);
  });

  it("falls back when the module computes other numbers than this version", async () => {
    const other = Buffer.from(await kernelModule());
    let changed = 0;
    for (let at = other.indexOf(invTwoPi()); at >= 0; at = other.indexOf(invTwoPi(), at)) {
      other[at + 4] = other[at + 4]! ^ 64;
      changed++;
    }
    expect(changed).toBeGreaterThan(0);
    const { kernel, notice } = loadKernel({ paths: [file("other.wasm", other)] });
    expect(kernel).toBe(typescriptKernel);
    expect(notice).toMatch(/other.wasm gives other numbers/);
  });

  it("adds a treecode when a new case asks for one, and finds it again by its name", () => {
    const { kernel, notice } = loadKernel({ treeError: 1e-3, paths: [good] });
    expect(kernel.name).toBe(`${MIXED_KERNEL_NAME}+tree(0.001)/1`);
    expect(notice).toMatch(/^treecode to a relative error of 0.001/);
    expect(loadKernel({ name: kernel.name, paths: [good] }).kernel.name).toBe(kernel.name);
    expect(() => loadKernel({ name: kernel.name, paths: [] })).toThrow(/not to be had here/);
  });

  it("says that there is no treecode where there is no module", () => {
    const { kernel, notice } = loadKernel({ treeError: 1e-3, paths: [] });
    expect(kernel).toBe(typescriptKernel);
    expect(notice).toMatch(/^no treecode without the compiled kernel; double precision, plain TypeScript/);
  });

  it("never swaps the arithmetic under a case that was begun", () => {
    expect(() => loadKernel({ name: MIXED_KERNEL_NAME, paths: [] })).toThrow(
      /rosenhead-moore-mixed\/1 is not to be had here/,
    );
    expect(() => loadKernel({ name: "rosenhead-moore-mixed/0", paths: [good] })).toThrow(
      /this version does not have it/,
    );
    expect(loadKernel({ name: MIXED_KERNEL_NAME, paths: [good] }).notice).toMatch(/as the case was begun/);
  });
});

/** The bytes of 1 / 2π as they stand in the module. */
function invTwoPi(): Buffer {
  const bytes = Buffer.alloc(8);
  bytes.writeDoubleLE(1 / (2 * Math.PI));
  return bytes;
}
