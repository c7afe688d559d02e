import { describe, expect, it } from "vitest";
import { AppError } from "../../../../orchestrator/contract/index.ts";
import { RunBook } from "../../../../orchestrator/planning/run-book.ts";
import { cpuTimed } from "../../../helpers/cpu-timed.ts";
import { campaignText, plainDescription, planOf, refusalOf } from "../../../helpers/planned.ts";

const axes = (lines: string) => campaignText(`axes:\n${lines}\nsufficiency: off`);

describe("a campaign that cannot be planned is refused with place, field and what is allowed", () => {
  it.each([
    [
      "a unit that is not ours",
      campaignText("").replace("span_m: 2.4", "span_ft: 8"),
      4,
      "case.wing.span_ft: there is no such field; give span_m, in m",
    ],
    [
      "a misspelt field",
      campaignText("").replace("pitch_deg", "pich_deg"),
      4,
      "case.wing.pich_deg: there is no such field; did you mean pitch_deg?",
    ],
    [
      "a value out of range",
      campaignText("").replace("span_m: 2.4", "span_m: 2400"),
      4,
      "case.wing.span_m: 2400 is out of range; takes a number from 0.01 to 200 m",
    ],
    [
      "a text for a number",
      campaignText("").replace("span_m: 2.4", "span_m: wide"),
      4,
      'case.wing.span_m: "wide" was given; takes a number from 0.01 to 200 m',
    ],
    [
      "a field in the wrong block",
      campaignText("").replace("{ kind: straight,", "{ kind: straight, pitch_deg: 3,"),
      3,
      "case.path.pitch_deg: there is no such field; it belongs at wing.pitch_deg",
    ],
    [
      "a path of no known kind",
      campaignText("").replace("kind: straight", "kind: strait"),
      3,
      'case.path.kind: "strait" was given; takes one of straight, circle, table; did you mean straight?',
    ],
    [
      "a missing field",
      campaignText("").replace("span_m: 2.4, ", ""),
      4,
      "case.wing.span_m: is missing; takes a number from 0.01 to 200 m",
    ],
    [
      "a misspelt field of the campaign",
      campaignText("acept_nothing: 1"),
      9,
      "acept_nothing: there is no such field",
    ],
    [
      "an unknown solver",
      campaignText("solver: bult-in"),
      9,
      'solver: "bult-in" was given; takes built-in; did you mean built-in?',
    ],
    [
      "an axis over no field",
      axes("  - { field: wing.sapn_m, values: [1, 2] }"),
      10,
      "wing.sapn_m: the case has no such field; did you mean wing.span_m?",
    ],
    [
      "an axis over a rotor that is not there",
      axes("  - { field: rotors.3.above_m, values: [1, 2] }"),
      10,
      "rotors.3.above_m: moves nothing: the base case has 2 rotors, counted from 1",
    ],
    [
      "a field moved by two axes",
      axes("  - { field: rotors.*.above_m, values: [1, 2] }\n  - { field: rotors.1.above_m, values: [3] }"),
      11,
      "rotors.1.above_m: is moved by axis 1 already (rotors.*.above_m)",
    ],
    [
      "an axis named twice",
      axes(
        "  - { field: wing.span_m, name: a, values: [1] }\n  - { field: wing.pitch_deg, name: a, values: [3] }",
      ),
      11,
      'axes.2: "a" is the name of number 1 already',
    ],
    [
      "an axis with a value twice",
      axes("  - { field: wing.span_m, values: [1, 2, 1] }"),
      10,
      "axes.1.values.3: 1 was given already, as value 1",
    ],
    [
      "an axis without values",
      axes("  - { field: wing.span_m, values: [] }"),
      10,
      "axes.1.values: an empty list was given; takes a list of 1 to 100000",
    ],
    [
      "a range without count",
      axes("  - { field: wing.span_m, range: { from: 1, to: 2 } }"),
      10,
      "axes.1.range: count is missing",
    ],
    [
      "a range of one value",
      axes("  - { field: wing.span_m, range: { from: 2, to: 2, count: 3 } }"),
      10,
      "from and to are both 2",
    ],
    [
      "a log range through zero",
      axes("  - { field: wing.pitch_deg, log_range: { from: 0, to: 2, count: 3 } }"),
      10,
      "both ends of a log_range have to be above zero",
    ],
    [
      "an axis value out of the field's range",
      axes("  - { field: wing.span_m, values: [2, 500] }"),
      10,
      "case.wing.span_m: 500 is out of range; takes a number from 0.01 to 200 m",
    ],
    [
      "a range that makes fractions of blades",
      axes("  - { field: rotors.*.blades, range: { from: 2, to: 3, count: 3 } }"),
      10,
      "case.rotors.1.blades: 2.5 was given; takes a whole number from 1 to 8",
    ],
    [
      "paired axes of different lengths",
      campaignText(
        "combine: paired\naxes:\n  - { field: wing.span_m, values: [1, 2] }\n  - { field: wing.pitch_deg, values: [3] }",
      ),
      9,
      "paired axes need the same number of values; they have 2, 1",
    ],
    [
      "a pair given twice",
      campaignText(
        "combine: paired\naxes:\n  - { field: wing.span_m, values: [1, 1] }\n  - { field: wing.pitch_deg, values: [3, 3] }",
      ),
      12,
      "two runs of the sweep come to the same case: span 1 m · pitch 3 deg, and span 1 m · pitch 3 deg",
    ],
    [
      "exclusions that leave nothing",
      axes("  - { field: wing.span_m, values: [1, 2] }\nleave_out: [{ when: { span: { from: 0 } } }]"),
      11,
      "leave_out leaves none of the 2 runs",
    ],
    [
      "an exclusion over no axis",
      axes("  - { field: wing.span_m, values: [1, 2] }\nleave_out: [{ when: { spam: 1 } }]"),
      11,
      'there is no axis called "spam"; did you mean span?',
    ],
    [
      "a baseline that is no variant",
      campaignText("baseline: rotors of\nvariants: [{ name: rotors off, set: { rotors: [] } }]"),
      9,
      'there is no variant called "rotors of"; did you mean rotors off?',
    ],
    [
      "a single case with a misspelt field",
      campaignText("single_cases: [{ name: x, set: { numerics.rotor_rows: 9 } }]"),
      9,
      "numerics.rotor_rows: the case has no such field; did you mean numerics.rotor_wake_rows?",
    ],
    [
      "a single case with a bad value",
      campaignText("single_cases: [{ name: x, set: { numerics.rotor_wake_rows: 1 } }]"),
      9,
      "case.numerics.rotor_wake_rows: 1 is out of range; takes a whole number from 6 to 2000 rows",
    ],
    [
      "a remedy that makes an impossible case",
      campaignText("remedies: [{ name: x, set: { numerics.step_deg: 90 }, cost: much }]"),
      9,
      "case.numerics.step_deg: 90 is out of range; takes a number from 1 to 45 deg",
    ],
    [
      "two single cases of one name",
      campaignText(
        "single_cases: [{ name: x, set: { wing.span_m: 1 } }, { name: x, set: { wing.span_m: 3 } }]",
      ),
      9,
      '"x" is the name of number 1 already',
    ],
    [
      "a channel that no run has",
      campaignText("", "{ channels: { CM: 1 % }, longest_steps: 9 }"),
      8,
      'accept.channels.CM: no run has a channel called "CM"; did you mean CN?',
    ],
    [
      "an onset channel that no run has",
      campaignText("onset: { channels: [rotor3.CT] }"),
      9,
      "did you mean rotor1.CT?",
    ],
    [
      "a tolerance of nothing",
      campaignText("", "{ channels: { CN: 0 % }, longest_steps: 9 }"),
      8,
      'accept.channels.CN: "0 %" was given; takes a number above zero (absolute) or text like "0.5 % of mean"',
    ],
    [
      "no longest run",
      campaignText("", "{ channels: { CN: 1 % } }"),
      8,
      "accept: needs one of longest_revolutions, longest_steps, longest_s",
    ],
    [
      "two longest runs",
      campaignText("", "{ channels: { CN: 1 % }, longest_steps: 9, longest_s: 1 }"),
      8,
      "accept: takes one of longest_revolutions, longest_steps, longest_s",
    ],
    [
      "a deadline that YAML reads as a number",
      campaignText("deadline: 8"),
      9,
      'deadline: 8 was given; takes a clock time like "06:30" or a duration like "8 h", in quotes',
    ],
    [
      "a deadline at once",
      campaignText("deadline: 0 h"),
      9,
      'deadline: "0 h" was given; takes a duration above zero',
    ],
    [
      "a companion with too long a wake",
      campaignText("sufficiency: { wake_length: 4 }").replace(
        "accept:",
        "  numerics: { wing_wake_spans: 30 }\naccept:",
      ),
      10,
      "case.numerics.wing_wake_spans: 120 is out of range; takes a number from 0.25 to 60 spans (the wake length companion of base case)",
    ],
    [
      "two lengths for one case",
      campaignText("single_cases: [{ name: x, set: { wing.span_m: 2.4 }, longest_steps: 5 }]"),
      9,
      'single case "x" is the same case as base case: one case cannot have two longest runs',
    ],
    [
      "a base case that is a number",
      "campaign: x\ncase: 3\naccept: { channels: { CN: 1 }, longest_s: 1 }",
      2,
      "case: 3 was given; takes a block of fields",
    ],
    ["a file that is a list", "- 1\n- 2\n", 1, "a list of 2 was given; takes a block of fields"],
  ])("%s", (_, text, line, words) => {
    const error = refusalOf(text);
    expect(`${error.message}`).toContain(words);
    expect(error.where).toMatch(new RegExp(`^small\\.yaml:${line}:\\d+$`));
    expect(error.fix).toBeTruthy();
    expect(error.code).toMatch(/^CAMPAIGN_(INVALID|EMPTY)$/);
  });

  it("lists every problem at once, each with its place, in file order", () => {
    const text = campaignText("onset: { channels: [] }\nworkers: 0").replace("span_m: 2.4", "span_ft: 8");
    const lines = refusalOf(text).message.split("\n");
    expect(lines[0]).toBe("small.yaml has 3 problems:");
    expect(lines.slice(1).map((line) => line.trim().split(" ")[0])).toEqual([
      "small.yaml:4:11",
      "small.yaml:9:10",
      "small.yaml:10:1",
    ]);
  });

  it.each(["", "   \n", "# only a comment\n", "\uFEFF", "null\n"])("an empty file %j", (text) => {
    const error = refusalOf(text);
    expect(error.code).toBe("CAMPAIGN_EMPTY");
    expect(error.message).toContain("the file holds nothing");
  });

  it("names the run whose inputs the solver refuses", () => {
    const describe: typeof plainDescription = (inputs) => {
      if ((inputs.wing as { span_m: number }).span_m > 2.5)
        throw new AppError("CASE_INVALID", "too wide", {
          where: "wing.span_m (rotors.1)",
          fix: "Take less.",
        });
      return plainDescription(inputs);
    };
    const error = refusalOf(axes("  - { field: wing.span_m, values: [2, 3] }"), { describe });
    expect(error.message).toBe("case.wing.span_m: too wide (in span 3 m)");
    expect(error.fix).toBe("Take less.");
    expect(error.where).toBe("small.yaml:10:39");
  });
});

describe("a very large number of runs", () => {
  const wide = (counts: readonly number[]) =>
    axes(
      ["wing.pitch_deg", "wing.sweep_deg", "wing.twist_deg"]
        .map((field, i) => `  - { field: ${field}, range: { from: 0, to: 9, count: ${counts[i]} } }`)
        .join("\n"),
    );

  it("is refused by its count before anything is expanded", () => {
    const { seconds } = cpuTimed(() => {
      const error = refusalOf(wide([100, 100, 100]));
      expect(error.code).toBe("CAMPAIGN_TOO_LARGE");
      expect(error.message).toContain("1000000 runs (100 × 100 × 100 = 1000000 combinations)");
      expect(refusalOf(wide([1e6, 1e6, 1e6])).message).toContain("1000000000000000000 runs");
    });
    expect(seconds).toBeLessThan(1);
  });

  it("is begun when it is said to be meant, up to a bound", () => {
    const error = refusalOf(wide([30, 20, 20]));
    expect(error.message).toContain("12000 runs");
    expect(error.fix).toContain("--yes");
    expect(planOf(wide([30, 20, 20]), { manyRunsMeant: true }).runs).toHaveLength(12_000);
    expect(refusalOf(wide([100, 100, 100]), { manyRunsMeant: true }).message).toContain(
      "one campaign holds 200000",
    );
  });
});

it("refuses two different cases that come to one run id", () => {
  const book = new RunBook({ solver: "s", modelVersion: "1" }, () => "abc");
  const draft = { role: "sweep" as const, name: null, varied: {}, words: {}, trail: [], position: [] };
  expect(book.enter(draft, { x: 1 }).isNew).toBe(true);
  expect(book.enter(draft, { x: 1 }).isNew).toBe(false);
  expect(() => book.enter(draft, { x: 2 })).toThrow("two different cases come to the same run id abc");
});
