/**
 * Median of the first `n` entries by quickselect (Hoare 1961), reordering them.
 *
 *   n odd: the middle order statistic; n even: the mean of the two middle ones
 *
 * Limits: entries must be finite; n = 0 gives NaN.
 *
 * @param values shape [>= n]; reordered
 * @returns same unit as the values, exact
 */
export function medianInPlace(values: Float64Array, n: number): number {
  if (n === 0) return Number.NaN;
  const upper = n >> 1;
  select(values, n, upper);
  const high = values[upper]!;
  if (n % 2 === 1) return high;
  // Everything left of `upper` is no larger, so the lower middle is their maximum.
  let low = values[0]!;
  for (let i = 1; i < upper; i++) if (values[i]! > low) low = values[i]!;
  return low + (high - low) / 2;
}

/** Puts the k-th smallest of the first n entries at position k, smaller ones left of it. */
function select(a: Float64Array, n: number, k: number): void {
  let left = 0;
  let right = n - 1;
  while (left < right) {
    const pivot = a[(left + right) >> 1]!;
    let i = left - 1;
    let j = right + 1;
    for (;;) {
      do i++;
      while (a[i]! < pivot);
      do j--;
      while (a[j]! > pivot);
      if (i >= j) break;
      const swap = a[i]!;
      a[i] = a[j]!;
      a[j] = swap;
    }
    if (k <= j) right = j;
    else left = j + 1;
  }
}

/** Median, leaving the values alone. See {@link medianInPlace}. */
export function median(values: Float64Array): number {
  return medianInPlace(Float64Array.from(values), values.length);
}
