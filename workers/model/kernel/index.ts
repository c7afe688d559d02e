// Induced velocity of vortex-filament lattices, the hot loop of the model: the lattice, the pair kernels that evaluate it.
// Not here: what sheds, moves or truncates a lattice. Read typescript-kernel.ts first: it states formula and order.
export { kernelAgrees } from "./kernel-self-test.ts";
export { createLattice, dropRows, type Lattice, pushRow } from "./lattice.ts";
export type { PairKernel, Points, Velocities } from "./pair-kernel.ts";
export { TREE_KERNEL_NAME, treeKernel } from "./tree-kernel.ts";
export { typescriptKernel } from "./typescript-kernel.ts";
export { type KernelVariant, MIXED_KERNEL_NAME, wasmKernel } from "./wasm-kernel.ts";
