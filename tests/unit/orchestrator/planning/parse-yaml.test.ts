import { describe, expect, it } from "vitest";
import { AppError } from "../../../../orchestrator/contract/index.ts";
import { parseYaml, YAML_LIMITS } from "../../../../orchestrator/planning/parse-yaml.ts";
import { cpuTimed } from "../../../helpers/cpu-timed.ts";

const read = (text: string) => parseYaml(text, "f.yaml").value;

function refusal(text: string): AppError {
  try {
    parseYaml(text, "f.yaml");
  } catch (error) {
    if (error instanceof AppError) return error;
    throw error;
  }
  throw new Error("nothing was refused");
}

describe("parseYaml", () => {
  it("reads plain values, and JSON as YAML", () => {
    const value = { a: 1, b: [true, null, "x"], c: { d: 2.5 } };
    expect(read("a: 1\nb: [true, null, x]\nc:\n  d: 2.5\n")).toEqual(value);
    expect(read(JSON.stringify(value))).toEqual(value);
  });

  it("keeps off and 06:30 as the words they are", () => {
    expect(read("a: off\nb: 06:30\n")).toEqual({ a: "off", b: "06:30" });
  });

  it("points at fields, at their nearest parent where a field is not given, and through aliases", () => {
    const { placeOf } = parseYaml("a:\n  b: 1\nl:\n  - x: 3\n", "f.yaml");
    expect(placeOf(["a", "b"])).toEqual({ line: 2, column: 3 });
    expect(placeOf(["a", "missing"])).toEqual({ line: 1, column: 1 });
    expect(placeOf(["l", 0, "x"])).toEqual({ line: 4, column: 5 });
    expect(placeOf([])).toEqual({ line: 1, column: 1 });
  });

  it("merges blocks: own fields win, earlier merged blocks win over later ones", () => {
    const text = "p: &p { a: 1, b: 1 }\nq: &q { b: 2, c: 2 }\nr: { <<: [*p, *q], a: 3 }\n";
    expect(read(text)).toMatchObject({ r: { a: 3, b: 1, c: 2 } });
    expect(read("p: &p { a: 1 }\nr:\n  a: 2\n  <<: *p\n")).toMatchObject({ r: { a: 2 } });
    const { placeOf } = parseYaml("p: &p { a: 1 }\nr:\n  a: 2\n  <<: *p\n", "f.yaml");
    expect(placeOf(["r", "a"])).toEqual({ line: 3, column: 3 });
  });

  it.each([
    ["a tab that indents", "a:\n\tb: 1\n", 2, "a tab stands where only spaces"],
    ["a block that is not closed", "a: [1, 2\nb: 3\n", 2, "not valid YAML"],
    ["a field given twice", "a: 1\nb: 2\na: 3\n", 3, "a is given twice"],
    ["a second document", "a: 1\n---\nb: 2\n", 2, "a second document"],
    ["an alias of nothing", "a: *b\n", 1, "points at nothing"],
    ["an unknown tag", "a: !!python/object x\n", 1, "is a tag that means nothing here"],
    [
      "a name that reaches the prototype",
      "a:\n  __proto__: { x: 1 }\n",
      2,
      "no field may be called __proto__",
    ],
    ["the same, merged", "a:\n  <<: { constructor: 1 }\n", 2, "no field may be called constructor"],
    ["a block as a name", "? { a: 1 }\n: 2\n", 1, "plain text"],
    ["a merge of a number", "a:\n  <<: 3\n", 2, "<< takes an alias of a block"],
  ])("refuses %s, with its line", (_, text, line, words) => {
    const error = refusal(text);
    expect(error.code).toBe("YAML_SYNTAX");
    expect(error.message).toContain(words);
    expect(error.where).toMatch(new RegExp(`^f\\.yaml:${line}:\\d+$`));
  });

  it("refuses an alias that contains itself", () => {
    expect(refusal("a: &a [*a]\n").message).toContain("nested too deeply");
    expect(refusal("a: &a\n  <<: *a\n").message).toContain("nested too deeply");
  });

  it("does not unfold a bomb of aliases", () => {
    const lines = ["a0: &a0 [x, x, x, x, x, x, x, x, x, x]"];
    for (let i = 1; i < 9; i++)
      lines.push(
        `a${i}: &a${i} [${Array(10)
          .fill(`*a${i - 1}`)
          .join(", ")}]`,
      );
    const { seconds } = cpuTimed(() => {
      expect(refusal(lines.join("\n")).message).toContain("more than 100000 values");
    });
    expect(seconds).toBeLessThan(4);
  });

  it("refuses what is nested too deeply, one level or 200 000", () => {
    for (const depth of [YAML_LIMITS.depth, YAML_LIMITS.depth + 20, 200_000])
      expect(refusal(`a: ${"[".repeat(depth)}${"]".repeat(depth)}`).message).toContain("nested too deeply");
  });

  it("refuses a megabyte and more, and reads half a megabyte of fields within seconds", () => {
    expect(refusal(`a: ${"x".repeat(YAML_LIMITS.characters)}`).code).toBe("TOO_LARGE");
    const text = Array.from({ length: 40_000 }, (_, i) => `field${i}: 1`).join("\n");
    const { seconds } = cpuTimed(() => {
      expect(Object.keys(read(text) as object)).toHaveLength(40_000);
    });
    expect(seconds).toBeLessThan(5);
  });
});
