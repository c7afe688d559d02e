import type { LegProgress, Plan, Verdict } from "../contract/index.ts";
import type { CampaignRun } from "../store/rows.ts";
import { legPriority } from "./leg-priority.ts";
import { predictedEndMs, type RunPace, secondsPerStep, stepsNeeded } from "./night-speed.ts";

interface Entry {
  run: CampaignRun;
  /** How far the leg is that is being computed. */
  live: LegProgress | null;
  /** Steps and seconds of the current attempt that were committed in this night, by the clock and of processor time. */
  measured: { steps: number; seconds: number; cpuSeconds: number };
}

const NOTHING: Entry["measured"] = { steps: 0, seconds: 0, cpuSeconds: 0 };

/** What the night knows of its runs while it goes on; the store has the last word. */
export class NightLedger {
  readonly #plan: Plan;
  readonly #entries: Map<string, Entry>;
  readonly #predicted = { measuredSeconds: 0, predictedSeconds: 0 };
  #done: number;
  #legs = 0;
  #computeSeconds = 0;
  #savedSeconds = 0;

  constructor(plan: Plan, list: readonly CampaignRun[]) {
    this.#plan = plan;
    this.#entries = new Map(list.map((run) => [run.runId, { run, live: null, measured: { ...NOTHING } }]));
    this.#done = list.filter((run) => run.state === "done").length;
  }

  get runs(): number {
    return this.#entries.size;
  }

  get done(): number {
    return this.#done;
  }

  /** Legs committed since the night began. */
  get legs(): number {
    return this.#legs;
  }

  /** Seconds of processor time committed since the night began. */
  get computeSeconds(): number {
    return this.#computeSeconds;
  }

  /** Seconds of processor time that runs ended early since the night began would still have taken to their longest. */
  get savedSeconds(): number {
    return this.#savedSeconds;
  }

  /** Runs that are not done. */
  open(): CampaignRun[] {
    return [...this.#entries.values()].map((entry) => entry.run).filter((run) => run.state !== "done");
  }

  verdicts(): Partial<Record<Verdict, number>> {
    const counts: Partial<Record<Verdict, number>> = {};
    for (const { run } of this.#entries.values())
      if (run.verdict !== null) counts[run.verdict] = (counts[run.verdict] ?? 0) + 1;
    return counts;
  }

  /** Takes note of how far a leg is; null when it has ended. */
  live(runId: string, progress: LegProgress | null): void {
    this.#entry(runId).live = progress;
  }

  /** Takes note of a leg that was committed, and of how the run stands after it. */
  committed(run: CampaignRun, leg: Readonly<Entry["measured"]>): void {
    const entry = this.#entry(run.runId);
    this.#legs += 1;
    this.#computeSeconds += leg.cpuSeconds;
    if (leg.steps > 0) {
      this.#predicted.measuredSeconds += leg.seconds;
      this.#predicted.predictedSeconds += leg.steps * predictedPerStep(run);
    }
    const before = run.attempt === entry.run.attempt ? entry.measured : NOTHING;
    entry.measured = {
      steps: before.steps + leg.steps,
      seconds: before.seconds + leg.seconds,
      cpuSeconds: before.cpuSeconds + leg.cpuSeconds,
    };
    entry.run = run;
    entry.live = null;
    if (run.state !== "done") return;
    this.#done += 1;
    const { steps, cpuSeconds } = entry.measured;
    if (run.verdict !== "failed" && steps > 0)
      this.#savedSeconds += (Math.max(0, run.longestSteps - run.steps) * cpuSeconds) / steps;
  }

  /** Seconds until a run reaches its longest, at the speed measured. */
  secondsLeft(runId: string): number {
    const pace = this.#pace(this.#entry(runId));
    return Math.max(0, pace.longestSteps - pace.steps) * secondsPerStep(pace, this.#correction());
  }

  /** Place of the run's next leg in the queue. */
  priority(runId: string, secondsLeft: number | null): number {
    const entry = this.#entry(runId);
    const { run } = entry;
    const pace = this.#pace(entry);
    const names = this.#plan.accept.channels.map((channel) => channel.name);
    const steps = stepsNeeded(run.judgement, names, pace);
    const secondsNeeded = steps * secondsPerStep(pace, this.#correction());
    return legPriority({ legs: run.legs, place: run.place, secondsNeeded, secondsLeft });
  }

  predictedEndMs(night: { workers: number; nowMs: number; deadlineMs: number | null }): number | null {
    const paces = [...this.#entries.values()].map((entry) => this.#pace(entry));
    return predictedEndMs(paces, { ...night, correction: this.#correction() });
  }

  #entry(runId: string): Entry {
    const entry = this.#entries.get(runId);
    if (entry === undefined) throw new Error(`run ${runId} is not part of the night`);
    return entry;
  }

  /** Measured over predicted seconds a step, over all that was measured; 1 before that. */
  #correction(): number {
    const { measuredSeconds, predictedSeconds } = this.#predicted;
    return predictedSeconds > 0 ? measuredSeconds / predictedSeconds : 1;
  }

  #pace({ run, live, measured }: Entry): RunPace {
    return {
      done: run.state === "done",
      steps: live?.step ?? run.steps,
      longestSteps: live?.longestSteps ?? run.longestSteps,
      measured: {
        steps: measured.steps + (live?.stepsDone ?? 0),
        seconds: measured.seconds + (live?.seconds ?? 0),
      },
      predictedPerStep: predictedPerStep(run),
    };
  }
}

function predictedPerStep({ planned }: CampaignRun): number {
  return planned.predictedSeconds / Math.max(1, planned.longestSteps);
}
