import { createHash } from "node:crypto";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { canonicalJson, runId } from "../../../../orchestrator/planning/run-id.ts";

/** The same value with every block's keys in another order. */
function shuffled(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(shuffled);
  if (typeof value !== "object" || value === null) return value;
  return Object.fromEntries(
    Object.entries(value)
      .reverse()
      .map(([key, item]) => [key, shuffled(item)]),
  );
}

describe("runId", () => {
  it("is the beginning of the SHA-256 of the canonical JSON", () => {
    const text = '{"inputs":{"a":[1,2.5],"b":"x"},"modelVersion":"3","solver":"built-in"}';
    const digest = createHash("sha256").update(text).digest("hex");
    expect(runId({ solver: "built-in", modelVersion: "3", inputs: { b: "x", a: [1, 2.5] } })).toBe(
      digest.slice(0, 12),
    );
  });

  it("does not depend on the order of keys", () => {
    fc.assert(
      fc.property(fc.jsonValue({ maxDepth: 4 }), (inputs) => {
        const id = runId({ solver: "s", modelVersion: "1", inputs });
        expect(runId({ modelVersion: "1", inputs: shuffled(inputs), solver: "s" })).toBe(id);
      }),
      { numRuns: 500, seed: 1_234_567 },
    );
  });

  it("does not depend on how a number is written", () => {
    const spelled = ["1.50", "15e-1", "1.5"].map((text) => canonicalJson({ x: Number(text) }));
    expect(new Set(spelled).size).toBe(1);
    expect(canonicalJson({ x: -0 })).toBe('{"x":0}');
  });

  it("depends on solver, model version and every input", () => {
    const base = { solver: "a", modelVersion: "1", inputs: { x: 1 } };
    const ids = [
      base,
      { ...base, solver: "b" },
      { ...base, modelVersion: "2" },
      { ...base, inputs: { x: 2 } },
    ].map(runId);
    expect(new Set(ids).size).toBe(4);
  });

  it("refuses what JSON cannot hold", () => {
    expect(() => canonicalJson({ x: Number.NaN })).toThrow("NaN");
    expect(() => canonicalJson({ x: () => 1 })).toThrow("function");
  });
});
