import { PassThrough } from "node:stream";
import { describe, expect, it } from "vitest";
import { confirmRuns } from "../../../../orchestrator/cli/confirm-runs.ts";
import { parseCampaign } from "../../../../orchestrator/planning/index.ts";
import { campaignText } from "../../../helpers/planned.ts";
import { Collector, testIo } from "../../../helpers/test-io.ts";

const campaign = (count: number) =>
  parseCampaign(
    campaignText(
      `axes:\n  - { field: wing.pitch_deg, range: { from: 0, to: 9, count: ${count} } }\nsufficiency: off`,
    ),
    "small.yaml",
  );

/** Surroundings of a person at a terminal who answers once. */
function terminal(answer: string) {
  const stderr = Object.assign(new Collector(), { isTTY: true });
  const stdin = Object.assign(new PassThrough(), { isTTY: true });
  stdin.write(`${answer}\n`);
  return { io: testIo({ stdin, stderr }), stderr };
}

describe("confirmRuns", () => {
  it("asks a person, who answers with the number", async () => {
    const { io, stderr } = terminal("20 000");
    await expect(confirmRuns(io, campaign(20_000), false)).resolves.toBe(true);
    expect(stderr.text).toContain("as many as 20000 runs. Type that number to go on:");
  });

  it("refuses when the answer is anything else", async () => {
    const { io } = terminal("y");
    await expect(confirmRuns(io, campaign(20_000), false)).rejects.toMatchObject({
      code: "CAMPAIGN_TOO_LARGE",
      message: "20000 runs were not confirmed",
    });
  });

  it("asks nobody for a usual number, after --yes, or where no person is", async () => {
    const { io, stderr } = terminal("y");
    await expect(confirmRuns(io, campaign(10_000), false)).resolves.toBe(false);
    await expect(confirmRuns(io, campaign(20_000), true)).resolves.toBe(true);
    await expect(confirmRuns(testIo(), campaign(20_000), false)).resolves.toBe(false);
    expect(stderr.text).toBe("");
  });
});
