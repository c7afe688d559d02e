import { describe, expect, it } from "vitest";
import { type LiveNight, nextPicture } from "../../../../api/http/index.ts";
import { nightDisplay } from "../../../../orchestrator/cli/night-display.ts";
import { clockWords, tallyWords } from "../../../../orchestrator/cli/night-words.ts";
import type { NightEvent } from "../../../../orchestrator/night/index.ts";
import type { CampaignRun } from "../../../../orchestrator/store/rows.ts";
import { Collector, testIo } from "../../../helpers/test-io.ts";

const run = { runId: "a1", number: 7, label: "tip_speed_ratio 3.5" };
const start = new Date(2026, 2, 1, 20, 0, 0);
const at = (minutes: number) => start.getTime() + minutes * 60_000;

const events: NightEvent[] = [
  { kind: "begun", campaign: "lantern", runs: 24, done: 0, workers: 2, deadlineMs: at(600) },
  { kind: "progress", worker: 1, run, attempt: 1, step: 100, longestSteps: 720, secondsLeft: 75 },
  { kind: "tally", runs: 24, done: 1, verdicts: { accepted: 1 }, predictedEndMs: at(90) },
  { kind: "attempt", run, attempt: 2, remedy: "larger core", reason: "unstable from step 310 on" },
  {
    kind: "run-done",
    run: {
      ...run,
      verdict: "needs-longer",
      steps: 720,
      longestSteps: 720,
      reason: "too few cycles",
    } as unknown as CampaignRun,
  },
  { kind: "notice", words: "slower SIMD is missing" },
];

function show(tty: boolean): string {
  const stderr = Object.assign(new Collector(), {
    isTTY: tty,
    columns: 200,
    cursorTo() {},
    clearLine() {},
    moveCursor() {},
  });
  const io = testIo({ stderr, now: () => start });
  const display = nightDisplay(io);
  let picture: LiveNight | null = null;
  for (const event of events) {
    picture = nextPicture(picture, event);
    display.show(event, picture);
  }
  display.end();
  display.show(events[5]!, picture);
  return stderr.text;
}

describe("the picture of a night", () => {
  it("follows workers and counts, and is gone when the night has ended", () => {
    let picture: LiveNight | null = null;
    for (const event of events.slice(0, 3)) picture = nextPicture(picture, event);
    expect(picture).toEqual({
      campaign: "lantern",
      runs: 24,
      done: 1,
      verdicts: { accepted: 1 },
      deadlineMs: at(600),
      predictedEndMs: at(90),
      workers: [null, { run, attempt: 1, step: 100, longestSteps: 720, secondsLeft: 75 }],
    });
    expect(nextPicture(picture, { kind: "idle", worker: 1 })?.workers).toEqual([null, null]);
    expect(nextPicture(picture, { kind: "ended" } as NightEvent)).toBeNull();
    expect(nextPicture(null, events[1]!)).toBeNull();
  });
});

describe("progress of a night", () => {
  it("comes as lines where no terminal is, one for each thing that happened", () => {
    expect(show(false).split("\n")).toEqual([
      "1 of 24 runs done (1 accepted), predicted end 21:30 (in 1 h 30 min), deadline 2026-03-02 06:00 (in 10 h 00 min)",
      "run 7 (tip_speed_ratio 3.5): attempt 2 with remedy larger core, because unstable from step 310 on",
      "run 7 (tip_speed_ratio 3.5): needs-longer after 720 of 720 steps: too few cycles",
      "slower SIMD is missing",
      "",
    ]);
  });

  it("comes as a bar for the night and one a worker on a terminal", () => {
    const text = show(true);
    expect(text).toContain("1 of 24 runs done (1 accepted)");
    expect(text).toContain("run 7 (tip_speed_ratio 3.5): step 100 of 720, at most 1 min 15 s left");
    expect(text).toContain("needs-longer after 720 of 720 steps: too few cycles");
    expect(text).toContain("idle");
    expect(text).toContain("█");
  });

  it("says clock times of other days with their date", () => {
    expect(clockWords(new Date(2026, 2, 1, 23, 5), start)).toBe("23:05");
    expect(clockWords(new Date(2026, 2, 2, 0, 5), start)).toBe("2026-03-02 00:05");
  });

  it("does not count below zero when the predicted end has passed", () => {
    const picture = { ...nextPicture(null, events[0]!)!, predictedEndMs: at(-5), deadlineMs: null };
    expect(tallyWords(picture, start)).toBe("0 of 24 runs done, predicted end 19:55 (in 0 s)");
  });
});
