/** A difference as people read it: in percent of the mean where that is a sensible measure, else as a number. */
export function amountInWords(amount: number, mean: number): string {
  const share = (100 * Math.abs(amount)) / Math.abs(mean);
  return share < 1000 ? `${round3(share)} %` : numberInWords(Math.abs(amount));
}

/** A number with three digits, no padding. */
export function numberInWords(value: number): string {
  return round3(value);
}

function round3(value: number): string {
  const rounded = Number(value.toPrecision(3));
  const size = Math.abs(rounded);
  return size !== 0 && (size < 1e-4 || size >= 1e6) ? rounded.toExponential() : String(rounded);
}
