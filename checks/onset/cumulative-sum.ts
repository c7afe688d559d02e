/**
 * A cumulative sum of excesses, kept at zero or above; one excess adds or takes at most 1.
 *
 *   C = max(0, C + clip(excess, −1, 1))
 *
 * @see Page (1954), Continuous inspection schemes, Biometrika 41
 */
export class CumulativeSum {
  value = 0;
  /** Excesses taken since the sum was last 0. */
  length = 0;

  /** Takes the next excess. */
  add(excess: number): void {
    this.value = Math.max(0, this.value + Math.max(-1, Math.min(1, excess)));
    this.length = this.value > 0 ? this.length + 1 : 0;
  }
}
