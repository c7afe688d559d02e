import { createHash } from "node:crypto";
import { AppError } from "../contract/index.ts";

/** Hexadecimal characters of a run id: 48 bits, a clash among 10^5 runs has a chance of 2e-5, and is refused. */
const RUN_ID_LENGTH = 12;

/**
 * Text that is the same for equal values: keys sorted, numbers in their shortest form, minus zero as zero. Fields that are
 * undefined are left out.
 *
 * @throws BUG for a value that JSON cannot hold, such as NaN
 */
export function canonicalJson(value: unknown): string {
  if (typeof value === "number") {
    if (!Number.isFinite(value)) throw new AppError("BUG", `${value} cannot be part of a run's inputs`);
    return JSON.stringify(value === 0 ? 0 : value);
  }
  if (value === null || typeof value === "string" || typeof value === "boolean") return JSON.stringify(value);
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(",")}]`;
  if (typeof value === "object") {
    const fields = Object.entries(value)
      .filter(([, item]) => item !== undefined)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([key, item]) => `${JSON.stringify(key)}:${canonicalJson(item)}`);
    return `{${fields.join(",")}}`;
  }
  throw new AppError("BUG", `a ${typeof value} cannot be part of a run's inputs`);
}

/** What decides whether two runs are the same. */
export interface RunIdentity {
  readonly solver: string;
  readonly modelVersion: string;
  readonly inputs: unknown;
}

/** Run id: the first characters of the SHA-256 (FIPS 180-4) of the canonical JSON of solver, model version and inputs. */
export function runId(identity: RunIdentity): string {
  const { solver, modelVersion, inputs } = identity;
  const text = canonicalJson({ solver, modelVersion, inputs });
  return createHash("sha256").update(text).digest("hex").slice(0, RUN_ID_LENGTH);
}
