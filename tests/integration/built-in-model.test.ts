import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { loadBuiltInSolver } from "../../orchestrator/cli/built-in-solver.ts";
import type { LegRunner, Plan } from "../../orchestrator/contract/index.ts";
import { expandCampaign, readCampaign } from "../../orchestrator/planning/index.ts";
import type { DataFolder } from "../../orchestrator/store/data-folder.ts";
import { campaignPicture } from "../helpers/campaign-picture.ts";
import { tempFolder } from "../helpers/temp-folder.ts";
import { emptyFolders, openQuietly, testPool, wholeNight } from "../helpers/test-night.ts";

// Our own invention, small enough to be computed in seconds.
const CAMPAIGN = `
campaign: Small wing
case:
  path: { kind: straight, speed_mps: 12 }
  wing: { span_m: 1, root_chord_m: 0.2, tip_chord_m: 0.2, pitch_deg: 4 }
  rotors:
    - { radius_m: 0.12, hub_radius_m: 0.03, ahead_m: 0.2, blades: 2, operation: generating, tip_speed_ratio: 3 }
  numerics: { rotor_wake_rows: 12, wing_wake_spans: 1 }
variants:
  - name: rotor off
    set: { rotors: [] }
baseline: rotor off
accept:
  channels: { CN: 1 % of mean, rotor1.CT: 2 % of mean }
  longest_revolutions: 14
sufficiency: off
`;

describe("the built-in model in a night", () => {
  const temp = tempFolder();
  const emptyFolder = emptyFolders(temp.path);
  let runner: LegRunner;
  let plan: Plan;
  beforeAll(async () => {
    runner = testPool(2, 1024);
    const campaign = await readCampaign(temp.write("small.yaml", CAMPAIGN), "small.yaml");
    const { describe: told, modelVersion } = loadBuiltInSolver();
    plan = expandCampaign(campaign, {
      describe: told,
      modelVersion,
      pairsPerSecond: 1e7,
      manyRunsMeant: false,
      cores: 2,
    });
  });
  afterAll(() => runner.close());

  it("gives the same bits when it is stopped over and over as when it is left alone", async () => {
    const whole = await openQuietly(await emptyFolder("whole"));
    expect((await wholeNight(whole, plan, runner, { legSeconds: 60 })).summary.endedBy).toBe("all-done");
    const expected = await campaignPicture(whole, plan.campaign);
    await whole.close();
    expect(expected.map((run) => run.verdict)).toContain("accepted");

    const cut = await openQuietly(await emptyFolder("cut"));
    let stops = 0;
    while (await cutShort(cut)) {
      stops += 1;
      expect(stops).toBeLessThan(40);
    }
    expect(stops).toBeGreaterThan(1);
    expect(await campaignPicture(cut, plan.campaign)).toEqual(expected);
    await cut.close();
  });

  /** A night that is stopped after a few looks at its progress; false when it came to its end before. */
  async function cutShort(folder: DataFolder): Promise<boolean> {
    let stop = () => {};
    let seen = 0;
    const { summary } = await wholeNight(folder, plan, runner, {
      legSeconds: 0.6,
      onStart: (ask) => {
        stop = ask;
      },
      onEvent: (event) => {
        if (event.kind === "progress" && event.step > 0 && ++seen === 6) stop();
      },
    });
    return summary.endedBy !== "all-done";
  }
});
