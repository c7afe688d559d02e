import { expect, it } from "vitest";
import { planWords } from "../../../../orchestrator/cli/plan-words.ts";
import { campaignText, planOf } from "../../../helpers/planned.ts";

const view = { now: new Date(2026, 2, 10, 22, 0, 0), workers: 2, showAll: false };
const sweep = `axes:
  - { field: rotors.*.above_m, values: [0, 0.3] }
variants: [{ name: rotors off, set: { rotors: [] } }]
baseline: rotors off
`;

it("shows count, axes, every run with its id, order, cost, end and deadline", () => {
  const plan = planOf(campaignText(`${sweep}deadline: 30 min`));
  const words = planWords(plan, view);
  expect(words).toContain("Small: 5 runs (2 of the sweep, 1 baseline, 2 companions)\n  above: 0, 0.3");
  for (const run of plan.runs)
    expect(words).toMatch(new RegExp(`${run.number}\\s+${run.runId}\\s.*${run.label}`));
  expect(words).toContain("Order of the night: 3, 1, 2, 4, 5");
  expect(words).toContain("until 2026-03-10 22:00, if every run goes to its longest");
  expect(words).toContain("Deadline: 2026-03-10 22:30, in 30 min 0 s.");
  expect(words).toContain("Nothing was written.");
});

it("says by how much the deadline may come too early", () => {
  const plan = planOf(campaignText(`${sweep}deadline: 20 s`));
  expect(planWords(plan, view)).toMatch(/it may come .* too early for the last runs/);
});

it("prints a warning that several runs share once, with their numbers", () => {
  const plan = planOf(campaignText(sweep, "{ channels: { CN: 1 % }, longest_steps: 4 }"));
  const warnings = planWords(plan, view).match(/^warning: .*/gm);
  expect(warnings).toEqual([
    "warning: accept: nothing can be accepted: the longest run has 4 steps, and one slowest period takes 6 (run 1, 2, 4, 5)",
  ]);
});

it("shows the beginning of a long list, and all of it when asked", () => {
  const plan = planOf(
    campaignText(
      "axes:\n  - { field: wing.pitch_deg, range: { from: 0, to: 9, count: 100 } }\nsufficiency: off",
    ),
  );
  expect(planWords(plan, view)).toContain("… and 40 more (--all prints them)");
  expect(planWords(plan, view)).not.toContain(plan.runs[60]!.runId);
  expect(planWords(plan, { ...view, showAll: true })).toContain(plan.runs[99]!.runId);
});
