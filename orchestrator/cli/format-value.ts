/**
 * A mean with its half-width, both to the second significant digit of the half-width: `0.4516 ± 0.0027`. Without a
 * half-width six digits of the mean.
 */
export function formatInterval(mean: number | null, halfWidth: number | null): string {
  if (mean === null) return "–";
  if (halfWidth === null || !Number.isFinite(halfWidth)) return sixDigits(mean);
  if (halfWidth === 0) return `${sixDigits(mean)} ± 0`;
  const decimals = 1 - Math.floor(Math.log10(halfWidth));
  if (decimals < 0 && Math.abs(mean) < 1e12)
    return `${roundTo(mean, 10 ** -decimals)} ± ${roundTo(halfWidth, 10 ** -decimals)}`;
  if (decimals < 0 || decimals > 8)
    return `${mean.toPrecision(significant(mean, halfWidth))} ± ${halfWidth.toPrecision(2)}`;
  return `${mean.toFixed(decimals)} ± ${halfWidth.toFixed(decimals)}`;
}

function roundTo(value: number, unit: number): number {
  return Math.round(value / unit) * unit;
}

/** A number to six significant digits, without trailing zeros. */
export function sixDigits(value: number): string {
  return Number.isFinite(value) ? String(Number(value.toPrecision(6))) : String(value);
}

/** Digits of the mean down to the second digit of the half-width, at most 15. */
function significant(mean: number, halfWidth: number): number {
  if (mean === 0) return 2;
  const digits = Math.floor(Math.log10(Math.abs(mean))) - Math.floor(Math.log10(halfWidth)) + 2;
  return Math.min(Math.max(digits, 2), 15);
}

/** A span of seconds in words that fit its size: `42 s`, `3 min 20 s`, `7 h 05 min`. */
export function formatDuration(seconds: number): string {
  const whole = Math.round(seconds);
  if (seconds < 10) return `${Number(seconds.toFixed(1))} s`;
  if (whole < 60) return `${whole} s`;
  if (whole < 3600) return `${Math.floor(whole / 60)} min ${whole % 60} s`;
  const minutes = Math.round(whole / 60);
  return `${Math.floor(minutes / 60)} h ${String(minutes % 60).padStart(2, "0")} min`;
}

/** A count with its noun: `1 run`, `3 runs`. */
export function countWords(n: number, noun: string): string {
  return `${n} ${noun}${n === 1 ? "" : "s"}`;
}
