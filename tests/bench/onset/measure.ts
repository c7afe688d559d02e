import { createOnsetMonitor, locateAfterAlarm, locateOnset } from "../../../checks/onset/index.ts";
import type { Onset } from "../../../orchestrator/contract/index.ts";
import { Draw } from "./draw.ts";
import type { OnsetScenario } from "./scenario.ts";

/** What became of the histories of one family. */
export interface FamilyOutcome {
  readonly family: string;
  readonly runs: number;
  /** Share with an onset named (`no-stable-baseline` is none), after the true onset for troubled ones. */
  readonly named: number;
  /** Share with any finding, `no-stable-baseline` included: what would stop a run or mark it. */
  readonly flagged: number;
  /** Named before the true onset's alarm could be right, for troubled families. */
  readonly early: number;
  readonly rightClass: number;
  /** Steps from the onset to the alarm. */
  readonly delayMedian: number;
  /** Errors of the onset in steps, and in e-folds where the family has a rate: medians of the sizes. */
  readonly errorSteps: number;
  readonly errorEfolds: number;
  readonly bandCoverage: number;
  /** Share whose trusted stretch ends before the true onset. */
  readonly trustedBefore: number;
  /** Median of found over true rate. */
  readonly rateRatio: number;
  /** What was named instead, by kind, for the table's reader. */
  readonly kinds: Readonly<Record<string, number>>;
}

/** Judges `runs` seeded histories of a family. */
export function measureFamily(
  family: string,
  make: (draw: Draw) => OnsetScenario,
  runs: number,
  seed: number,
  find: (scenario: OnsetScenario) => Onset | null,
  report?: (run: number, scenario: OnsetScenario, onset: Onset | null) => void,
): FamilyOutcome {
  const found: { scenario: OnsetScenario; onset: Onset | null }[] = [];
  for (let run = 0; run < runs; run++) {
    const scenario = make(new Draw(seed * 100_003 + run * 7_919 + hash(family)));
    const onset = find(scenario);
    report?.(run, scenario, onset);
    found.push({ scenario: { ...scenario, channels: {} }, onset });
  }
  return summarise(family, found);
}

/** Judges the whole history. */
export function findAfterwards(scenario: OnsetScenario): Onset | null {
  return locateOnset(historyOf(scenario), scenario).onset;
}

/** Judges what is known at the first alarm, as a running leg does. */
export function findLive(scenario: OnsetScenario): Onset | null {
  const names = Object.keys(scenario.channels);
  const { periodsSteps, plannedSteps } = scenario;
  const monitor = createOnsetMonitor({ channels: names, periodsSteps, plannedSteps });
  const history = historyOf(scenario);
  const columns = Object.values(scenario.channels);
  for (let t = 0; t < history.times.length; t++) {
    monitor.push(columns.map((x) => x[t]!));
    const alarm = monitor.alarms[0];
    if (alarm === undefined) continue;
    const soFar = {
      times: history.times.slice(0, t + 1),
      channels: Object.fromEntries(names.map((name, i) => [name, columns[i]!.slice(0, t + 1)])),
    };
    return locateAfterAlarm(soFar, alarm, { ...scenario, alarms: monitor.alarms });
  }
  return null;
}

function historyOf({ channels }: OnsetScenario) {
  const [first] = Object.values(channels);
  return { times: Float64Array.from(first!, (_, t) => t), channels };
}

function summarise(
  family: string,
  found: readonly { scenario: OnsetScenario; onset: Onset | null }[],
): FamilyOutcome {
  const isNamed = (o: Onset | null): o is Onset => o !== null && o.kind !== "no-stable-baseline";
  const early = ({ scenario, onset }: (typeof found)[number]) =>
    isNamed(onset) && scenario.truth !== null && onset.alarmIndex < scenario.truth.onset;
  const hits = found.filter((f) => isNamed(f.onset) && !early(f));
  const each = hits.flatMap(({ scenario: { truth }, onset }) => (truth ? [{ truth, onset: onset! }] : []));
  const share = (test: (x: (typeof each)[number]) => boolean) => each.filter(test).length / each.length;
  const errors = each.map(({ truth, onset }) => Math.abs(onset.index! - truth.onset));
  const kinds: Record<string, number> = {};
  for (const { onset } of found) {
    const kind = onset?.kind ?? "none";
    kinds[kind] = (kinds[kind] ?? 0) + 1;
  }
  return {
    family,
    runs: found.length,
    named: hits.length / found.length,
    flagged: found.filter((f) => f.onset !== null).length / found.length,
    early: found.filter(early).length / found.length,
    rightClass: share(({ truth, onset }) => truth.accepted.includes(onset.kind)),
    delayMedian: middle(each.map(({ truth, onset }) => onset.alarmIndex - truth.onset)),
    errorSteps: middle(errors),
    errorEfolds: middle(each.map(({ truth }, i) => errors[i]! * (truth.rate ?? Number.NaN))),
    bandCoverage: share(({ truth, onset }) => onset.band![0] <= truth.onset && truth.onset <= onset.band![1]),
    trustedBefore: share(({ truth, onset }) => (onset.trustedEndIndex ?? 0) <= truth.onset),
    rateRatio: middle(
      each.map(({ truth, onset }) => (onset.growthPerStep ?? Number.NaN) / (truth.rate ?? Number.NaN)),
    ),
    kinds,
  };
}

function middle(values: readonly number[]): number {
  const finite = values.filter(Number.isFinite).sort((a, b) => a - b);
  return finite.length === 0 ? Number.NaN : finite[finite.length >> 1]!;
}

/** A family's own stream of seeds. */
function hash(text: string): number {
  let h = 2_166_136_261;
  for (const c of text) h = Math.imul(h ^ c.charCodeAt(0), 16_777_619);
  return h >>> 0;
}
