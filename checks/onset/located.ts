import type { OnsetKind } from "../../orchestrator/contract/index.ts";

/** Where a trouble begins, as one of the locators finds it. */
export interface Located {
  readonly kind: OnsetKind;
  readonly index: number;
  /** First and last index between which it lies, at about 95 %. */
  readonly band: readonly [number, number];
  /** E-folds a step; null for abrupt kinds. */
  readonly growthPerStep: number | null;
}
