/** Blocks that the reference lags behind the newest one, and blocks it needs before the monitors are armed. */
export interface ArmingCounts {
  readonly late: number;
  readonly blocks: number;
}

/** How a run is cut into blocks: what every channel's monitor and the locator share. */
export interface MonitorLayout {
  /** Periods that are removed, steps, longest first. */
  readonly periods: readonly number[];
  /** Declared periods that are too long for the run to be learnt, steps. */
  readonly ignoredPeriods: readonly number[];
  /** Samples a block. */
  readonly block: number;
  /** Samples at the start that are not looked at. */
  readonly skip: number;
  readonly arming: ArmingCounts;
}

/** Periods beyond this number make the lag polynomial long and are left out, shortest first. */
const PERIODS_MAX = 4;

/** Largest share of the planned run that may pass before the monitors are armed. */
const BLIND_SHARE_MAX = 0.6;

/**
 * Chooses block length, start and periods for a run.
 *
 *   block = p·ceil(b/p) with p the longest period and b = planned/50 kept within 10..20 samples
 *   skip  = max(0.10·planned, 2·Σ periods)
 *
 * Short runs get short blocks, since a block of 20 samples would leave them unwatched for most of their length. A
 * period too long for the run to show it twice and still be watched is ignored (a loop flown once, say). A period of
 * which another is a whole multiple adds nothing and is dropped.
 *
 * @param periodsSteps declared periods, steps; need not be whole; below 2 they cannot be resolved and are dropped
 * @param plannedSteps length that the run is meant to have, steps
 */
export function monitorLayout(periodsSteps: readonly number[], plannedSteps: number): MonitorLayout {
  const planned = Number.isFinite(plannedSteps) && plannedSteps > 0 ? plannedSteps : 0;
  let periods = independentPeriods(periodsSteps);
  const ignoredPeriods: number[] = [];
  for (;;) {
    const layout = layoutFor(periods, planned);
    const armedAt = layout.skip + (layout.arming.late + layout.arming.blocks) * layout.block;
    if (periods.length === 0 || armedAt <= BLIND_SHARE_MAX * planned) return { ...layout, ignoredPeriods };
    ignoredPeriods.push(periods[0]!);
    // What the longest one had absorbed may now be needed itself.
    const left = periodsSteps.filter((p) => !ignoredPeriods.some((q) => Math.abs(p - q) <= 1e-9 * q));
    periods = independentPeriods(left);
  }
}

function layoutFor(periods: readonly number[], planned: number): Omit<MonitorLayout, "ignoredPeriods"> {
  const least = Math.max(10, Math.min(20, Math.round(planned / 50)));
  const longest = periods[0];
  const block = longest === undefined ? least : Math.round(longest * Math.ceil(least / longest));
  const total = periods.reduce((sum, p) => sum + p, 0);
  const skip = Math.ceil(Math.max(0.1 * planned, 2 * total + 4));
  const arming = planned / block >= 50 ? { late: 4, blocks: 10 } : { late: 3, blocks: 8 };
  return { periods, block, skip, arming };
}

function independentPeriods(declared: readonly number[]): number[] {
  const sorted = declared.filter((p) => Number.isFinite(p) && p >= 2).sort((a, b) => b - a);
  const kept: number[] = [];
  for (const p of sorted) {
    const covered = kept.some((long) => Math.abs(long / p - Math.round(long / p)) <= 1e-6 * (long / p));
    if (!covered && kept.length < PERIODS_MAX) kept.push(p);
  }
  return kept;
}
