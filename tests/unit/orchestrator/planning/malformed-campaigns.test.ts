import { readFileSync } from "node:fs";
import { join } from "node:path";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { AppError, ERROR_CODES } from "../../../../orchestrator/contract/index.ts";
import { cpuTimed } from "../../../helpers/cpu-timed.ts";
import { planOf } from "../../../helpers/planned.ts";
import { projectRoot } from "../../../tidy/source-tree.ts";

const EXAMPLES = ["first-campaign.yaml", "lantern.yaml"].map((name) =>
  readFileSync(join(projectRoot, "examples", name), "utf8"),
);

/** Bits of YAML that break things: brackets, anchors, tags, numbers at the edge, names that reach prototypes. */
const SPLINTERS = [
  ..."[ ] { } : - & * ! # ' \" | > % @ \t \n , ? 0 \u0000 \uFEFF \u{1F300} ~".split(" "),
  ...[
    "*rotor",
    "&rotor ",
    "<<: *rotor",
    "!!binary ",
    "---\n",
    "...\n",
    "__proto__: 1\n",
    "constructor: {}\n",
  ],
  ...[
    "-1",
    "1e999",
    ".nan",
    ".inf",
    "0x7f",
    "null",
    "99999999999999999999",
    "true",
    "5 %",
    "rotors.*.blades",
    "[]",
    "{}",
  ],
];

/** A place in a text, anywhere with equal chance. */
const place = fc.noBias(fc.integer({ min: 0, max: 2 ** 30 }));

/** One change of a text: a stretch cut out, doubled, moved, or replaced by splinters; or a word replaced. */
const mutation = fc.record({
  kind: fc.constantFrom("cut", "double", "move", "splinter", "word", "word"),
  from: place,
  to: place,
  length: fc.noBias(fc.integer({ min: 1, max: 60 })),
  splinters: fc.array(fc.constantFrom(...SPLINTERS), { minLength: 1, maxLength: 3 }),
});

type Mutation = typeof mutation extends fc.Arbitrary<infer T> ? T : never;

function mutated(text: string, { kind, from, to, length, splinters }: Mutation): string {
  if (kind === "word") return wordReplaced(text, from, to % 2 === 0 ? splinters[0]! : null, to);
  const start = from % text.length;
  const piece = text.slice(start, start + length);
  const rest = text.slice(0, start) + text.slice(start + length);
  const at = to % (rest.length + 1);
  if (kind === "cut") return rest;
  if (kind === "double") return text.slice(0, start) + piece + text.slice(start);
  if (kind === "move") return rest.slice(0, at) + piece + rest.slice(at);
  return text.slice(0, start) + splinters.join("") + text.slice(start + (length % 8));
}

/** Replaces a word of the lines that are no comments by a splinter, or by another word of the text. */
function wordReplaced(text: string, which: number, splinter: string | null, other: number): string {
  const words = [...text.matchAll(/(?<=^[^#\n]*)[\w.*]+/gm)];
  if (words.length === 0) return text;
  const { 0: word, index } = words[which % words.length]!;
  return (
    text.slice(0, index) + (splinter ?? words[other % words.length]![0]) + text.slice(index + word.length)
  );
}

/** Plans a text; returns the refusal, or null where it was a campaign after all. Anything else thrown is a fault. */
function refusal(text: string): AppError | null {
  try {
    planOf(text);
    return null;
  } catch (error) {
    if (error instanceof AppError) return error;
    throw error;
  }
}

describe("malformed campaigns", () => {
  it("never crash or hang, and are refused with code, place and advice: 2000 mutations of the examples", () => {
    let refused = 0;
    let slowest = 0;
    fc.assert(
      fc.property(
        fc.constantFrom(...EXAMPLES),
        fc.array(mutation, { minLength: 1, maxLength: 5 }),
        (text, changes) => {
          const { result: error, seconds } = cpuTimed(() => refusal(changes.reduce(mutated, text)));
          slowest = Math.max(slowest, seconds);
          if (error === null) return;
          refused++;
          expect(ERROR_CODES[error.code].exit).toBe(2);
          expect(error.message.length).toBeGreaterThan(10);
          expect(error.where).toMatch(/^small\.yaml(:[1-9]\d*:[1-9]\d*)?$/);
          expect(error.fix).toBeTruthy();
          expect(/\[object|undefined|BUG/.test(error.message)).toBe(false);
        },
      ),
      { numRuns: 2000, seed: 52_110_427 },
    );
    // Most mutations break something, and some, as in a comment, do not: both have to occur for this to test anything.
    expect(refused).toBeGreaterThan(1000);
    expect(refused).toBeLessThan(2000);
    expect(slowest).toBeLessThan(2);
  });

  it("leave no trace on the prototype of objects", () => {
    for (const text of [
      "__proto__: { polluted: 1 }",
      "case: { constructor: { prototype: { polluted: 1 } } }",
    ])
      expect(refusal(text)?.message).toContain("no field may be called");
    expect(refusal('{"case": {"__proto__": {"polluted": 1}}}')?.code).toBe("YAML_SYNTAX");
    expect(({} as Record<string, unknown>).polluted).toBeUndefined();
  });
});
