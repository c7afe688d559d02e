import { readFileSync } from "node:fs";
import { join } from "node:path";
import { Ajv2020 } from "ajv/dist/2020.js";
import { describe, expect, it } from "vitest";
import { parse } from "yaml";
import { runInProcess } from "../../../helpers/run-in-process.ts";
import { projectRoot } from "../../../tidy/source-tree.ts";

interface Node {
  readonly properties?: Readonly<Record<string, Node>>;
  readonly description?: string;
  readonly required?: unknown;
  readonly [key: string]: unknown;
}

const printed = async (): Promise<Node> => JSON.parse((await runInProcess(["schema"])).stdout);

/** Every node of a schema, with its path. */
function nodesOf(node: unknown, path = ""): [string, Node][] {
  if (typeof node !== "object" || node === null) return [];
  return [
    [path, node as Node],
    ...Object.entries(node).flatMap(([key, value]) => nodesOf(value, `${path}/${key}`)),
  ];
}

describe("midwatch schema", () => {
  it("prints JSON Schema of draft 2020-12, with every field of a campaign described", async () => {
    const schema = await printed();
    expect(schema.$schema).toBe("https://json-schema.org/draft/2020-12/schema");
    const fields = Object.entries(schema.properties!);
    expect(fields.length).toBeGreaterThan(12);
    const silent = fields.filter(([, field]) => !("description" in field)).map(([name]) => name);
    expect(silent).toEqual([]);
  });

  it("holds the case with units, ranges and meaning, and requires none of its fields, since an axis may supply it", async () => {
    const { properties } = await printed();
    const wing = properties!.case!.properties!.wing!;
    expect(wing.properties!.span_m).toMatchObject({ type: "number", minimum: 0.01, maximum: 200 });
    expect(wing.properties!.span_m!.description).toContain("m");
    expect(nodesOf(properties!.case).filter(([, node]) => Array.isArray(node.required))).toEqual([]);
  });

  it("names every field that the examples use", async () => {
    const { properties } = await printed();
    for (const name of ["first-campaign.yaml", "lantern.yaml"]) {
      const campaign = parse(readFileSync(join(projectRoot, "examples", name), "utf8"), { merge: true });
      expect(Object.keys(campaign).filter((key) => !(key in properties!))).toEqual([]);
      const blocks = properties!.case!.properties!;
      expect(Object.keys(campaign.case).filter((key) => !(key in blocks))).toEqual([]);
      expect(Object.keys(campaign.case.wing).filter((key) => !(key in blocks.wing!.properties!))).toEqual([]);
    }
  });
});

// Reference: ajv, a general validator of JSON Schema.
describe("the schema as a general validator reads it", () => {
  const accepts = async (campaign: unknown) => {
    const validate = new Ajv2020({ strict: false, unicodeRegExp: true }).compile(await printed());
    return validate(campaign);
  };
  const example = (name: string) =>
    parse(readFileSync(join(projectRoot, "examples", name), "utf8"), { merge: true });

  it("accepts the examples", async () => {
    for (const name of ["first-campaign.yaml", "lantern.yaml"])
      expect(await accepts(example(name))).toBe(true);
  });

  it("accepts a case from which an axis supplies a field", async () => {
    const { span_m: _, ...wing } = example("first-campaign.yaml").case.wing;
    const axes = [{ field: "wing.span_m", values: [2, 3] }];
    const campaign = example("first-campaign.yaml");
    expect(await accepts({ ...campaign, axes, case: { ...campaign.case, wing } })).toBe(true);
  });

  it("refuses unknown fields, values out of range, and what has no accept block", async () => {
    const campaign = example("first-campaign.yaml");
    const { accept: _, ...without } = campaign;
    const wide = { ...campaign, case: { ...campaign.case, wing: { ...campaign.case.wing, span_m: 5000 } } };
    const feet = { ...campaign, case: { ...campaign.case, wing: { ...campaign.case.wing, span_ft: 5 } } };
    for (const wrong of [without, wide, feet, { ...campaign, axis: [] }, { ...campaign, deadline: "soon" }])
      expect(await accepts(wrong)).toBe(false);
  });
});
