import { existsSync, readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { AppError } from "../orchestrator/contract/index.ts";
import {
  type KernelVariant,
  kernelAgrees,
  MIXED_KERNEL_NAME,
  type PairKernel,
  typescriptKernel,
  wasmKernel,
} from "./model/kernel/index.ts";

/** A pair kernel and, in a sentence, which one it is and why. */
export interface LoadedKernel {
  readonly kernel: PairKernel;
  readonly notice: string;
}

type Attempt = { readonly kernel: PairKernel } | { readonly problem: string };

/** Where the compiled module lies, seen from dist/workers and from workers. */
const MODULE_PATHS = ["./model/kernel/lattice.wasm", "../dist/workers/model/kernel/lattice.wasm"].map(
  (path) => fileURLToPath(new URL(path, import.meta.url)),
);

/** Largest difference from the reference on the self-test, m/s. Measured: 6e-7 for mixed precision. */
const TOLERANCE: Readonly<Record<KernelVariant, number>> = { double: 0, mixed: 5e-6 };

/**
 * The pair kernel for a run: mixed precision in WebAssembly, or plain TypeScript where that is not to be had.
 *
 * A case that was begun with one kernel goes on with that one: give the name it had, and get the same arithmetic (by the
 * fastest code there is for it) or an error, never another kernel.
 *
 * @param name the `name` of the kernel that the case was begun with; undefined for a new case
 * @throws UNAVAILABLE when the named kernel cannot be had here
 */
export function loadKernel(name?: string, paths: readonly string[] = MODULE_PATHS): LoadedKernel {
  if (name === undefined) return newCase(paths);
  if (name === typescriptKernel.name) return double(paths);
  if (name !== MIXED_KERNEL_NAME) throw unavailable(name, "this version does not have it");
  const mixed = compiled("mixed", paths);
  if ("problem" in mixed) throw unavailable(name, mixed.problem);
  return { ...mixed, notice: "mixed precision, WebAssembly, as the case was begun" };
}

function newCase(paths: readonly string[]): LoadedKernel {
  const mixed = compiled("mixed", paths);
  if ("kernel" in mixed) return { ...mixed, notice: "mixed precision, WebAssembly" };
  return double(paths);
}

function double(paths: readonly string[]): LoadedKernel {
  const double = compiled("double", paths);
  if ("kernel" in double) return { ...double, notice: "double precision, WebAssembly" };
  return {
    kernel: typescriptKernel,
    notice: `double precision, plain TypeScript, five or more times slower: ${double.problem}`,
  };
}

function compiled(variant: KernelVariant, paths: readonly string[]): Attempt {
  const path = paths.find((candidate) => existsSync(candidate));
  if (path === undefined)
    return { problem: `no compiled kernel at ${paths.join(" or ")}; run \`npm run build:kernel\`` };
  try {
    const kernel = wasmKernel(readFileSync(path), variant);
    if (kernelAgrees(kernel, typescriptKernel, TOLERANCE[variant])) return { kernel };
    return { problem: `${path} gives other numbers than this version; run \`npm run build:kernel\`` };
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error);
    return { problem: `${path} does not load (${why}); run \`npm run build:kernel\`` };
  }
}

const unavailable = (name: string, why: string): AppError =>
  new AppError("UNAVAILABLE", `the kernel ${name} is not to be had here: ${why}`, {
    where: "the kernel that the case was begun with",
    fix: "run `npm run build:kernel`, or compute the case anew under this version",
  });
