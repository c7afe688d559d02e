import { mkdirSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import {
  type ChannelInfo,
  type ChannelJudgement,
  encodeHistoryBlock,
  encodeHistoryEnd,
  encodeHistoryHead,
  type HistoryJudgement,
  type Plan,
  type Verdict,
} from "../../orchestrator/contract/index.ts";
import type { DataFolder } from "../../orchestrator/store/data-folder.ts";
import type { NextStep } from "../../orchestrator/store/store.ts";

const CHANNELS: readonly ChannelInfo[] = [
  { name: "load", unit: "1", what: "invented load", role: "load" },
  { name: "monitor", unit: "1", what: "invented monitor", role: "monitor" },
];
const STEPS = 500;
const DT = 0.01;

/** The history that every run of a filled folder has. */
export const filledHistory = {
  times: Float64Array.from({ length: STEPS }, (_, i) => (i + 1) * DT),
  load: Float64Array.from({ length: STEPS }, (_, i) => 0.45 + Math.sin(i) / 300),
};

/** Puts a campaign into a folder, its first run accepted, its second unstable, all others not begun. */
export async function fillFolder(folder: DataFolder, plan: Plan): Promise<void> {
  await folder.store.register(plan, Date.UTC(2026, 2, 1, 20));
  await finishRun(folder, plan, 0, {
    verdict: "accepted",
    stopCause: "accepted",
    reason: "every demanded channel is accepted",
  });
  await finishRun(folder, plan, 1, {
    verdict: "unstable",
    stopCause: "onset",
    reason: "unstable from step 310 on, too soon for an average",
  });
}

async function finishRun(
  folder: DataFolder,
  plan: Plan,
  index: number,
  end: Omit<Extract<NextStep, { kind: "done" }>, "kind">,
): Promise<void> {
  const { runId } = plan.runs[index]!;
  const claim = await folder.store.claim(plan.campaign, runId, 1, 0);
  if (claim === null) throw new Error("the run could not be claimed");
  const file = `runs/${runId}/1.1`;
  const bytes = writeHistory(join(folder.dir, file), runId);
  const done = await folder.store.commit({
    campaign: plan.campaign,
    runId,
    attempt: 1,
    fence: claim.fence,
    nowMs: Date.UTC(2026, 2, 1, 20, 1),
    outcome: end.stopCause,
    fromStep: 0,
    seconds: 2,
    computed: {
      history: { file, fromStep: 1, toStep: STEPS, bytes },
      checkpoint: null,
      steps: STEPS,
      channels: CHANNELS,
      periods: [],
      dtSeconds: DT,
    },
    ended: null,
    judgedSteps: STEPS,
    steps: STEPS,
    longestSteps: plan.runs[index]!.longestSteps,
    judgement: judgement(end),
    next: { kind: "done", ...end },
  });
  if (done !== "committed") throw new Error("the run could not be committed");
}

function writeHistory(path: string, runId: string): number {
  const names = CHANNELS.map((channel) => channel.name);
  const head = { runId, attempt: 1, legId: "1", dtSeconds: DT, channels: names, units: ["1", "1"] };
  const monitor = new Float64Array(STEPS).fill(1);
  const { times, load } = filledHistory;
  const parts = [
    encodeHistoryHead(head),
    encodeHistoryBlock({ fromStep: 1, times, columns: [load, monitor] }),
    encodeHistoryEnd(STEPS),
  ];
  mkdirSync(dirname(path), { recursive: true });
  writeFileSync(path, Buffer.concat(parts));
  return parts.reduce((sum, part) => sum + part.length, 0);
}

function judgement({ verdict, reason }: { verdict: Verdict; reason: string }): HistoryJudgement {
  const load: ChannelJudgement = {
    verdict,
    mean: 0.4501,
    plainMean: 0.4502,
    halfWidth: 0.0023,
    confidence: 0.95,
    tolerance: 0.01,
    window: { fromIndex: 100, toIndex: STEPS, fromTime: 1.01, toTime: 5 },
    effectiveSamples: 180,
    period: null,
    warnings: [],
    samplesNeeded: null,
    hiddenDrift: 0.001,
    tests: [],
    words: reason,
  };
  return { samples: STEPS, dt: DT, onset: null, notes: [], channels: { load } };
}
