import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { judgeHistory } from "../../../checks/index.ts";
import { readCsvColumns } from "../../helpers/read-csv-columns.ts";

// Source: twelve synthetic histories whose mean, transient and oracle half-width are known by construction (truth.json);
// no threshold of the checks was tuned to them.
interface Item {
  file: string;
  shouldAccept: "yes" | "no" | "need-longer" | "flag-variance";
  trueMean: number | null;
  tolerance: number;
  periodSamples: number | null;
  oracleHalfWidth95: number;
}
const data = new URL("../data/stationarity/", import.meta.url);
const items: Item[] = JSON.parse(readFileSync(new URL("truth.json", data), "utf8")).items;
const judged = items.map((item) => {
  const { t, value } = readCsvColumns(new URL(item.file, data));
  const history = judgeHistory(
    { times: t!, channels: { value: value! } },
    {
      tolerance: { absolute: item.tolerance },
      periods: item.periodSamples === null ? [] : [item.periodSamples],
    },
  );
  return { item, history, judgement: history.channels.value! };
});
const accepted = judged.filter(({ judgement }) => judgement.verdict === "accepted");

it("reads all twelve", () => expect(judged).toHaveLength(12));

it("accepts none of the histories that must not be accepted", () => {
  const wrong = accepted.filter(
    ({ item }) => item.shouldAccept === "no" || item.shouldAccept === "need-longer",
  );
  expect(wrong.map(({ item }) => item.file)).toEqual([]);
});

it("accepts all but at most one of the good ones", () => {
  const good = judged.filter(({ item }) => item.shouldAccept === "yes");
  const refused = good.filter(({ judgement }) => judgement.verdict !== "accepted");
  expect(good.length).toBeGreaterThanOrEqual(7);
  expect(refused.length).toBeLessThanOrEqual(1);
});

describe.each(judged)("$item.file", ({ item, judgement, history }) => {
  it("covers the true mean with its interval whenever it gives one to use", () => {
    if (judgement.verdict === "accepted") {
      expect(Math.abs(judgement.mean! - item.trueMean!)).toBeLessThanOrEqual(judgement.halfWidth!);
      expect(judgement.halfWidth!).toBeLessThanOrEqual(item.tolerance);
    } else expect(judgement.words.length).toBeGreaterThan(20);
  });

  it("names no onset: a mean that moves is not a wake that breaks down", () => {
    expect(history.onset === null || history.onset.kind === "mean-shift").toBe(true);
  });

  it("flags the change of variance, and only that one", () => {
    expect(judgement.warnings.includes("variance-changed")).toBe(item.shouldAccept === "flag-variance");
  });
});

it("accepts the mean of the history whose variance changes, since the mean itself is sound", () => {
  expect(accepted.some(({ item }) => item.shouldAccept === "flag-variance")).toBe(true);
});

it("bounds the noise-free record instead of calling its oscillation uncertainty", () => {
  const { judgement } = judged.find(({ item }) => item.file.startsWith("09"))!;
  expect(judgement.halfWidth!).toBeGreaterThan(0);
  expect(judgement.halfWidth!).toBeLessThan(2e-4);
  expect(judgement.effectiveSamples).toBeNull();
});
