import { AppError } from "../../../orchestrator/contract/index.ts";

/** The part of the WebAssembly standard that is used here; Node's own types leave it out. */
declare const WebAssembly: {
  Module: new (bytes: Uint8Array) => object;
  Instance: new (module: object, imports: object) => { readonly exports: unknown };
  Memory: new (size: {
    initial: number;
    maximum: number;
  }) => { readonly buffer: ArrayBuffer; grow(pages: number): number };
};

const PAGE_BYTES = 65_536;
/** Memory grows by a whole number of these: 1 MiB. */
const STEP_PAGES = 16;
/** No kernel takes more than 1 GiB, room for some five million nodes. */
const MAX_PAGES = 16_384;

/** A module's memory, which grows in steps and never shrinks. */
export interface WasmMemory {
  /** Makes sure that `bytes` bytes exist. */
  reserve(bytes: number): void;
  /** The memory as doubles; ask again after `reserve`. */
  doubles(): Float64Array;
}

/**
 * Compiles a module and gives it a memory of its own.
 *
 * @throws UNAVAILABLE when the module does not compile or link here
 */
export function instantiate<Exports>(bytes: Uint8Array): { exports: Exports; memory: WasmMemory } {
  try {
    const memory = new WebAssembly.Memory({ initial: STEP_PAGES, maximum: MAX_PAGES });
    const instance = new WebAssembly.Instance(new WebAssembly.Module(bytes), { env: { memory } });
    let doubles = new Float64Array(memory.buffer);
    const reserve = (wanted: number) => {
      const missing = Math.ceil(wanted / PAGE_BYTES) - memory.buffer.byteLength / PAGE_BYTES;
      if (missing <= 0) return;
      const pages = memory.buffer.byteLength / PAGE_BYTES + Math.ceil(missing / STEP_PAGES) * STEP_PAGES;
      if (pages > MAX_PAGES) throw tooLarge(wanted);
      memory.grow(pages - memory.buffer.byteLength / PAGE_BYTES);
      doubles = new Float64Array(memory.buffer);
    };
    return { exports: instance.exports as Exports, memory: { reserve, doubles: () => doubles } };
  } catch (cause) {
    throw new AppError("UNAVAILABLE", "the compiled kernel does not load here", {
      where: "wasmKernel",
      fix: "run `npm run build:kernel`, or use a Node.js whose WebAssembly has 128-bit vectors (16.4 or later)",
      cause,
    });
  }
}

const tooLarge = (bytes: number): AppError =>
  new AppError("TOO_LARGE", `the wake needs ${Math.round(bytes / 2 ** 20)} MiB in the kernel`, {
    where: "wasmKernel",
    fix: `shorten the wake: at most ${(MAX_PAGES * PAGE_BYTES) / 2 ** 20} MiB are allowed`,
  });
