/** What the place of a leg in the queue depends on. */
export interface LegStanding {
  /** Legs that the run has had for this campaign. */
  readonly legs: number;
  /** Place of the run in the order of the night, from 0. */
  readonly place: number;
  /** Seconds of compute until the run is expected to be accepted; null where nothing is known. */
  readonly secondsNeeded: number | null;
  /** Seconds until the night ends; null for no end. */
  readonly secondsLeft: number | null;
}

const LATER_LEGS = 1_000_000;
/** Runs that cannot be done tonight come after those that can. */
const HOPELESS = 500_000;
const SECONDS_MAX = 49_000;

/**
 * Place of a leg in the queue, 1 to 2 000 000, smaller first. Every run first gets one leg, in the order of the night, so
 * that it shows what it is; then whoever needs least compute to an accepted average goes first, which brings the most
 * half-widths under their tolerance per second; what cannot be accepted before the deadline comes last.
 */
export function legPriority({ legs, place, secondsNeeded, secondsLeft }: LegStanding): number {
  if (legs === 0) return 1 + Math.min(place, LATER_LEGS - 2);
  const needed = Math.min(secondsNeeded ?? SECONDS_MAX, SECONDS_MAX);
  const hopeless = secondsLeft !== null && secondsNeeded !== null && secondsNeeded > secondsLeft;
  return LATER_LEGS + (hopeless ? HOPELESS : 0) + Math.round(10 * needed);
}
