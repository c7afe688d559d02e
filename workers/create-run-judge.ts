import { judgeBesideOnset } from "../checks/judge-beside-onset.ts";
import { nextLookLength } from "../checks/mean/index.ts";
import {
  createOnsetMonitor,
  locateAfterAlarm,
  type OnsetAlarm,
  type OnsetMonitor,
} from "../checks/onset/index.ts";
import {
  type AcceptRule,
  AppError,
  type ChannelInfo,
  type ChannelJudgement,
  type DeclaredPeriod,
  type HistorySamples,
  type Onset,
  type OnsetRule,
  type Tolerance,
} from "../orchestrator/contract/index.ts";
import type { Finding, RunJudge } from "./run-judge.ts";

/** What a judge is told about the run and the campaign's rules; counts are steps of the attempt. */
export interface RunJudgeOptions {
  readonly channels: readonly ChannelInfo[];
  readonly periods: readonly DeclaredPeriod[];
  readonly dtSeconds: number;
  readonly accept: AcceptRule;
  readonly onset: OnsetRule;
  readonly longestSteps: number;
  readonly shortestSteps: number;
}

/** Channels of single strips: too many to watch and to average one by one. */
const STRIP = /^strips?\b|\bstrips?[.\d]/;

/**
 * The judge of one attempt: onset monitors over the watched channels, looks at the demanded ones at the lengths of the
 * checks' own ladder, and a final judgement of every load.
 *
 * Runs of one campaign differ in what they record (a wing without rotors has no thrust): what a run does not have is not
 * demanded of it.
 *
 * @throws CASE_INVALID where a run records nothing of what is demanded or watched
 */
export function createRunJudge(options: RunJudgeOptions): RunJudge {
  return new AttemptJudge(options);
}

class AttemptJudge implements RunJudge {
  readonly nextLook = nextLookLength;
  readonly #options: RunJudgeOptions;
  readonly #columns: ReadonlyMap<string, number>;
  readonly #watched: readonly string[];
  readonly #watchedColumns: readonly number[];
  readonly #demanded: ReadonlyMap<string, Tolerance>;
  readonly #periodsSteps: readonly number[];
  readonly #monitor: OnsetMonitor;
  readonly #sample: Float64Array;
  #alarm: OnsetAlarm | null = null;

  constructor(options: RunJudgeOptions) {
    const { channels, accept, onset, longestSteps } = options;
    const names = channels.map((channel) => channel.name);
    this.#options = options;
    this.#columns = new Map(names.map((name, column) => [name, column]));
    const watched = onset.channels === "all" ? names.filter((name) => !STRIP.test(name)) : onset.channels;
    this.#watched = watched.filter((name) => this.#columns.has(name));
    this.#watchedColumns = this.#watched.map((name) => this.#columnOf(name));
    this.#sample = new Float64Array(this.#watched.length);
    const demanded = accept.channels.filter(({ name }) => this.#columns.has(name));
    this.#demanded = new Map(demanded.map(({ name, tolerance }) => [name, tolerance]));
    const wanted = accept.channels.map(({ name }) => name);
    if (demanded.length === 0) throw nothingRecorded("accept", wanted, names);
    if (this.#watched.length === 0) throw nothingRecorded("onset", watched, names);
    this.#periodsSteps = options.periods.map((period) => period.steps);
    this.#monitor = createOnsetMonitor({
      channels: this.#watched,
      periodsSteps: this.#periodsSteps,
      plannedSteps: longestSteps,
      bounds: onset.bounds,
      sensitivity: onset.sensitivity,
    });
  }

  push(values: Float64Array): boolean {
    for (let i = 0; i < this.#sample.length; i++) this.#sample[i] = values[this.#watchedColumns[i]!]!;
    this.#alarm ??= this.#monitor.push(this.#sample);
    return this.#alarm !== null;
  }

  look(samples: HistorySamples): Finding {
    return this.#finding(samples, this.#shift(samples), this.#demanded.keys());
  }

  atTheEnd(samples: HistorySamples): Finding {
    return this.#finding(samples, this.#shift(samples), this.#everything());
  }

  afterAlarm(samples: HistorySamples): Finding {
    return this.#finding(samples, this.#locate(samples, this.#alarm!), this.#everything());
  }

  afterNonFinite(samples: HistorySamples, words: string): Finding {
    this.push(new Float64Array(this.#options.channels.length).fill(Number.NaN));
    const broken = withMissingSample(samples, this.#options.dtSeconds);
    const onset = { ...this.#locate(broken, this.#alarm!), words };
    return this.#finding(samples, onset, this.#everything());
  }

  /** A shift of the mean stops nothing; it goes with the averages as a warning. */
  #shift(samples: HistorySamples): Onset | null {
    const alarm = this.#monitor.alarms.find((one) => !one.stops);
    if (alarm === undefined) return null;
    const onset = this.#locate(samples, alarm);
    return onset.kind === "mean-shift" ? onset : null;
  }

  #locate(samples: HistorySamples, alarm: OnsetAlarm): Onset {
    const columns = this.#watched.map(
      (name, i) => [name, samples.columns[this.#watchedColumns[i]!]!] as const,
    );
    return locateAfterAlarm({ times: samples.times, channels: Object.fromEntries(columns) }, alarm, {
      periodsSteps: this.#periodsSteps,
      plannedSteps: this.#options.longestSteps,
      alarms: this.#monitor.alarms,
    });
  }

  #everything(): Set<string> {
    const loads = this.#options.channels.filter(({ role, name }) => role === "load" && !STRIP.test(name));
    return new Set([...this.#demanded.keys(), ...loads.map((channel) => channel.name)]);
  }

  #finding(samples: HistorySamples, onset: Onset | null, names: Iterable<string>): Finding {
    const channels: Record<string, ChannelJudgement> = {};
    for (const name of names) channels[name] = this.#judge(samples, onset, name);
    return {
      judgement: {
        samples: samples.times.length,
        dt: this.#options.dtSeconds,
        onset,
        notes: this.#monitor.notes,
        channels,
      },
      accepted: [...this.#demanded.keys()].every((name) => channels[name]?.verdict === "accepted"),
    };
  }

  #columnOf(name: string): number {
    const column = this.#columns.get(name);
    if (column === undefined) throw new Error(`there is no channel ${name}`);
    return column;
  }

  #judge(samples: HistorySamples, onset: Onset | null, name: string): ChannelJudgement {
    const { dtSeconds, accept, shortestSteps } = this.#options;
    return judgeBesideOnset(samples.columns[this.#columnOf(name)]!, onset, {
      dt: dtSeconds,
      times: samples.times,
      tolerance: this.#demanded.get(name) ?? null,
      confidence: accept.confidence,
      periods: this.#periodsSteps,
      samplesMin: shortestSteps,
    });
  }
}

function nothingRecorded(
  block: "accept" | "onset",
  wanted: readonly string[],
  recorded: readonly string[],
): AppError {
  return new AppError("CASE_INVALID", `this run records none of: ${wanted.join(", ")}`, {
    where: `${block}.channels`,
    fix: `It records: ${recorded.filter((name) => !STRIP.test(name)).join(", ")}.`,
  });
}

/** The record with the sample that the solver could not give. */
function withMissingSample(samples: HistorySamples, dtSeconds: number): HistorySamples {
  const longer = (column: Float64Array, last: number): Float64Array => {
    const all = new Float64Array(column.length + 1);
    all.set(column);
    all[column.length] = last;
    return all;
  };
  const next = (samples.times.length + 1) * dtSeconds;
  return {
    fromStep: samples.fromStep,
    times: longer(samples.times, next),
    columns: samples.columns.map((column) => longer(column, Number.NaN)),
  };
}
