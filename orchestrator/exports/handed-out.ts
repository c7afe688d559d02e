import type { LoadRow } from "../night/index.ts";

/**
 * The loads as they may leave midwatch: what is not accepted keeps its row and its reason and gives no number, unless
 * all are asked for; `accepted` and `verdict` then mark it.
 */
export function handedOut(rows: readonly LoadRow[], all: boolean): LoadRow[] {
  return rows.map((row) =>
    row.accepted || all
      ? row
      : {
          ...row,
          mean: null,
          halfWidth: null,
          plainMean: null,
          effectiveSamples: null,
          window: null,
          uncertainty: { statistical: null, sufficiency: [] },
        },
  );
}
