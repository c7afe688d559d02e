import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import type { ChannelInfo, DeclaredPeriod } from "../../../orchestrator/contract/index.ts";
import { type FlightPath, flightPath } from "../path/flight-path.ts";
import { channelList } from "../record/channels.ts";
import { type Timing, timing } from "../timing.ts";
import { planform } from "../wing/planform.ts";
import { pairCount } from "./pair-count.ts";
import { type CaseWarning, validity } from "./validity.ts";

/** What can be said of a case without running it. */
export interface CaseOutlook {
  readonly dtSeconds: number;
  readonly stepsPerRevolution: number;
  readonly channels: readonly ChannelInfo[];
  readonly periods: readonly DeclaredPeriod[];
  /** Nodes of all wakes at a step, steps counted from 1, and the most that there ever are. */
  readonly nodesAt: (step: number) => number;
  readonly nodesAtFullWake: number;
  /** Segment–point pairs of one step and of a run of so many steps. */
  readonly pairsPerStepAt: (step: number) => number;
  readonly pairsOver: (steps: number) => number;
  /** Steps of one loop; null where the path does not close. */
  readonly loopSteps: number | null;
  /** Step at which the kept wake can have returned to the wing on a closed path; null where it cannot. */
  readonly wakeReturnSteps: number | null;
  readonly warnings: readonly CaseWarning[];
}

/**
 * Describes a case: time step, channels, periods, cost, doubts about its validity. Fast, and runs nothing.
 *
 * @throws CASE_INVALID where the inputs contradict each other or leave the method's reach
 */
export function describeCase(inputs: Case): CaseOutlook {
  const path = flightPath(inputs);
  const times = timing(inputs);
  const form = planform(inputs.wing);
  const warnings = validity(inputs, times, path);
  const reference = {
    speed: times.referenceSpeed,
    areaM2: form.areaM2,
    spanM: form.spanM,
    density: inputs.air.density_kgpm3,
  };
  const loopSteps = path.loopSeconds === null ? null : path.loopSeconds / times.dtSeconds;
  return {
    dtSeconds: times.dtSeconds,
    stepsPerRevolution: times.stepsPerRevolution,
    channels: channelList(inputs, reference),
    periods: periodsOf(inputs, times, path, loopSteps),
    ...pairCount(inputs, times),
    loopSteps,
    wakeReturnSteps: wakeReturn(inputs, times, loopSteps),
    warnings,
  };
}

function periodsOf(
  { numerics, rotors, wind }: Case,
  times: Timing,
  path: FlightPath,
  loopSteps: number | null,
): DeclaredPeriod[] {
  const blades = rotors.map((rotor, i) => ({
    name: `blade passing of rotor ${i + 1}`,
    steps: (2 * Math.PI) / (rotor.blades * times.rotorSpeeds[i]! * times.dtSeconds),
  }));
  const cuts = [
    { name: "cut of the rotor wakes", steps: rotors.length > 0 ? numerics.truncate_every : 1 },
    { name: "cut of the wing's wake", steps: times.wingCutEvery },
  ].filter((period, i, all) => period.steps > 1 && all.findIndex((p) => p.steps === period.steps) === i);
  const loop =
    loopSteps !== null && (path.varies || wind.gust !== null) ? [{ name: "loop", steps: loopSteps }] : [];
  const seen: DeclaredPeriod[] = [];
  for (const period of [...blades, ...cuts, ...loop]) {
    if (!seen.some((other) => Math.abs(other.steps - period.steps) < 1e-9 * period.steps)) seen.push(period);
  }
  return seen;
}

/**
 * A loop after its start the wing is back where it began, and its wake has drifted with the wind by one loop's way. It can be
 * met if it is kept for so long and has not drifted away by more than a span.
 */
function wakeReturn(inputs: Case, times: Timing, loopSteps: number | null): number | null {
  if (loopSteps === null) return null;
  const { numerics, rotors, wind, wing } = inputs;
  const kept = Math.max(
    (times.wingRows - 1) * numerics.wing_row_every,
    rotors.length > 0 ? numerics.rotor_wake_rows : 0,
  );
  const drift = wind.speed_mps * loopSteps * times.dtSeconds;
  return kept >= loopSteps && drift <= wing.span_m ? Math.ceil(loopSteps) : null;
}
