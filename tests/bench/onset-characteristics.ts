// Measures how often trouble is found, how well it is placed, and how often there is a false alarm: seeded Monte-Carlo.
//   node --import tsx tests/bench/onset-characteristics.ts [--quick] [--seed N] [--only TEXT] [--runs N] [--json FILE] [--markdown FILE]
import { writeFileSync } from "node:fs";
import { parseArgs } from "node:util";
import { type FamilyOutcome, findAfterwards, findLive, measureFamily } from "./onset/measure.ts";
import { LOOK_ALIKES, stableRun, TOO_EARLY } from "./onset/sound.ts";
import { measureSpeed } from "./onset/speed.ts";
import { onsetTables } from "./onset/tables.ts";
import { TROUBLE } from "./onset/trouble.ts";

const { values } = parseArgs({
  options: {
    quick: { type: "boolean", default: false },
    seed: { type: "string", default: "20260201" },
    only: { type: "string", default: "" },
    runs: { type: "string" },
    verbose: { type: "boolean", default: false },
    json: { type: "string" },
    markdown: { type: "string" },
  },
});
const seed = Number(values.seed);
const perFamily = Number(values.runs ?? (values.quick ? 40 : 300));
const stable = Number(values.runs ?? (values.quick ? 200 : 3000));

const measureAll = (families: typeof TROUBLE, runs: number, find = findAfterwards): FamilyOutcome[] =>
  Object.entries(families)
    .filter(([name]) => name.includes(values.only))
    .map(([name, make]) => {
      const outcome = measureFamily(name, make, runs, seed, find, (run, { truth, periodsSteps }, onset) => {
        if (!values.verbose) return;
        const where = onset && `${onset.kind} at ${onset.index} [${onset.band}], alarm ${onset.alarmIndex}`;
        console.error(`${name} ${run}: true ${truth?.onset} ${truth?.rate} (${periodsSteps}); ${where}`);
      });
      console.error(`${name}: done`);
      return outcome;
    });

const results = {
  seed,
  trouble: measureAll(TROUBLE, perFamily),
  live: measureAll(TROUBLE, perFamily, findLive),
  lookAlikes: measureAll(LOOK_ALIKES, perFamily),
  tooEarly: measureAll(TOO_EARLY, perFamily),
  stable: measureAll({ "stable, 5000 steps": stableRun }, stable),
  microsecondsPerSample: measureSpeed(seed),
};
const markdown = onsetTables(results);
console.log(markdown);
if (values.json !== undefined) writeFileSync(values.json, `${JSON.stringify(results, null, 1)}\n`);
if (values.markdown !== undefined) writeFileSync(values.markdown, markdown);
