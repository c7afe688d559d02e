// Measures how often the judgement of a mean is right, and what it costs: seeded Monte-Carlo over scenario families.
//   node --import tsx tests/bench/stationarity-characteristics.ts [--quick] [--seed N] [--only TEXT] [--json FILE] [--markdown FILE]
import { writeFileSync } from "node:fs";
import { parseArgs } from "node:util";
import { judgeRecord, nextLookLength } from "../../checks/index.ts";
import { FINISHED_SCENARIOS, SCENARIOS } from "./stationarity/families/index.ts";
import { markdownTable } from "./stationarity/markdown-table.ts";
import { type Characteristics, fixedLength, type RuleUnderTest, sequential } from "./stationarity/measure.ts";
import type { Scenario } from "./stationarity/scenario.ts";

const { values } = parseArgs({
  options: {
    quick: { type: "boolean", default: false },
    seed: { type: "string", default: "20260101" },
    only: { type: "string", default: "" },
    json: { type: "string" },
    markdown: { type: "string" },
    replications: { type: "string" },
  },
});
const seed = Number(values.seed);
const replications = Number(values.replications ?? (values.quick ? 40 : 400));
const rule: RuleUnderTest = { judge: judgeRecord, nextLook: nextLookLength };
const wanted = ({ name }: Scenario, _: number, all: readonly Scenario[]) =>
  all.some((s) => s.name === values.only) ? name === values.only : name.includes(values.only);
const chosen = SCENARIOS.filter(wanted);
const finished = FINISHED_SCENARIOS.filter(wanted);
/** Length of the fixed-length records in oracle lengths: the tolerance is then 2.2 ideal half-widths. */
const FIXED = 2.2 ** 2;

const rows: Characteristics[] = [];
for (const scenario of chosen) {
  rows.push(sequential(scenario, rule, replications, seed));
  rows.push(fixedLength(scenario, rule, replications, seed + 1, FIXED));
  console.error(`${scenario.name}: done`);
}
for (const scenario of finished) {
  rows.push(fixedLength(scenario, rule, replications, seed + 2, scenario.longest));
  console.error(`${scenario.name}: done`);
}
const tables = (["sequential", "fixed length"] as const).map(
  (mode) => `### ${mode}\n\n${markdownTable(rows.filter((row) => row.mode === mode))}`,
);
const markdown = `${tables.join("\n\n")}\n\nSeed ${seed}; standard errors in brackets.\n`;
console.log(markdown);
if (values.json !== undefined) writeFileSync(values.json, `${JSON.stringify({ seed, rows }, null, 1)}\n`);
if (values.markdown !== undefined) writeFileSync(values.markdown, markdown);
