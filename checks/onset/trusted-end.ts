import type { Located } from "./located.ts";
import type { MonitorLayout } from "./monitor-layout.ts";

/** Share of the sound stretch that is kept in any case. */
const KEPT_SHARE = 0.6;

/**
 * First sample that may no longer be averaged: the guard before an onset.
 *
 *   lower end of the band − max(2·block, 3/σ), but at least 60 % of the way from the skipped start to the onset
 *
 * Three e-folds before the onset a growing part is at a twentieth of the noise.
 *
 * @returns index; null for a shift of the mean, which leaves both sides sound
 */
export function trustedEnd(located: Located, layout: MonitorLayout): number | null {
  if (located.kind === "mean-shift") return null;
  const { skip, block } = layout;
  const growing = located.growthPerStep === null ? 0 : 3 / located.growthPerStep;
  const cautious = located.band[0] - Math.max(2 * block, growing);
  const least = skip + KEPT_SHARE * Math.max(0, located.index - skip);
  return Math.max(0, Math.floor(Math.max(cautious, Math.min(least, located.index))));
}
