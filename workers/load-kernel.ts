import { existsSync, readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { AppError } from "../orchestrator/contract/index.ts";
import {
  type KernelVariant,
  kernelAgrees,
  MIXED_KERNEL_NAME,
  type PairKernel,
  TREE_KERNEL_NAME,
  treeKernel,
  typescriptKernel,
  wasmKernel,
} from "./model/kernel/index.ts";

/** Which kernel is wanted. */
export interface WantedKernel {
  /** The `name` of the kernel that a case was begun with: that arithmetic, or an error. */
  readonly name?: string;
  /** For a new case: use a treecode with this relative error where the module is there. */
  readonly treeError?: number;
  /** Where to look for the compiled module, in this order. */
  readonly paths?: readonly string[];
}

/** A pair kernel and, in a sentence, which one it is and why. */
export interface LoadedKernel {
  readonly kernel: PairKernel;
  readonly notice: string;
}

type Module = { readonly bytes: Uint8Array; readonly path: string } | { readonly problem: string };
type Attempt = { readonly kernel: PairKernel } | { readonly problem: string };

/** Where the compiled module lies, seen from dist/workers and from workers. */
const MODULE_PATHS = ["./model/kernel/lattice.wasm", "../dist/workers/model/kernel/lattice.wasm"].map(
  (path) => fileURLToPath(new URL(path, import.meta.url)),
);

/** Largest difference from the reference on the self-test, m/s. Measured: 5e-7 for mixed precision. */
const TOLERANCE: Readonly<Record<KernelVariant, number>> = { double: 0, mixed: 5e-6 };

/**
 * The pair kernel for a run: mixed precision in WebAssembly, or plain TypeScript where that is not to be had.
 *
 * A case that was begun with one kernel goes on with that one: give the name it had, and get the same arithmetic (by the
 * fastest code there is for it) or an error, never another kernel.
 *
 * @throws UNAVAILABLE when the named kernel cannot be had here
 */
export function loadKernel({ name, treeError, paths = MODULE_PATHS }: WantedKernel = {}): LoadedKernel {
  const module = findModule(paths);
  if (name !== undefined) return named(name, module);
  const direct = newCase(module);
  if (treeError === undefined) return direct;
  if ("problem" in module || direct.kernel === typescriptKernel) {
    return { ...direct, notice: `no treecode without the compiled kernel; ${direct.notice}` };
  }
  return withTree(module.bytes, treeError, direct);
}

function named(name: string, module: Module): LoadedKernel {
  const tree = TREE_KERNEL_NAME.exec(name);
  if (tree !== null) {
    const direct = named(tree[1]!, module);
    if ("problem" in module) throw unavailable(name, module.problem);
    return withTree(module.bytes, Number(tree[2]), direct);
  }
  if (name === typescriptKernel.name) return double(module);
  if (name !== MIXED_KERNEL_NAME) throw unavailable(name, "this version does not have it");
  const mixed = compiled("mixed", module);
  if ("problem" in mixed) throw unavailable(name, mixed.problem);
  return { ...mixed, notice: "mixed precision, WebAssembly, as the case was begun" };
}

function newCase(module: Module): LoadedKernel {
  const mixed = compiled("mixed", module);
  if ("kernel" in mixed) return { ...mixed, notice: "mixed precision, WebAssembly" };
  return double(module);
}

function double(module: Module): LoadedKernel {
  const double = compiled("double", module);
  if ("kernel" in double) return { ...double, notice: "double precision, WebAssembly" };
  return {
    kernel: typescriptKernel,
    notice: `double precision, plain TypeScript, five or more times slower: ${double.problem}`,
  };
}

function withTree(bytes: Uint8Array, relativeError: number, direct: LoadedKernel): LoadedKernel {
  const kernel = treeKernel({ bytes, relativeError, direct: direct.kernel });
  return {
    kernel,
    notice: `treecode to a relative error of ${relativeError}; where it does not pay, ${direct.notice}`,
  };
}

function findModule(paths: readonly string[]): Module {
  const path = paths.find((candidate) => existsSync(candidate));
  if (path === undefined) return { problem: `no compiled kernel at ${paths.join(" or ")}; ${BUILD}` };
  try {
    return { bytes: readFileSync(path), path };
  } catch (error) {
    return { problem: `${path} cannot be read (${reason(error)}); ${BUILD}` };
  }
}

function compiled(variant: KernelVariant, module: Module): Attempt {
  if ("problem" in module) return module;
  try {
    const kernel = wasmKernel(module.bytes, variant);
    if (kernelAgrees(kernel, typescriptKernel, TOLERANCE[variant])) return { kernel };
    return { problem: `${module.path} gives other numbers than this version; ${BUILD}` };
  } catch (error) {
    return { problem: `${module.path} does not load (${reason(error)}); ${BUILD}` };
  }
}

const BUILD = "run `npm run build:kernel`";

const reason = (error: unknown): string => (error instanceof Error ? error.message : String(error));

const unavailable = (name: string, why: string): AppError =>
  new AppError("UNAVAILABLE", `the kernel ${name} is not to be had here: ${why}`, {
    where: "the kernel that the case was begun with",
    fix: "run `npm run build:kernel`, or compute the case anew under this version",
  });
