/** A value to the second significant digit of what it is uncertain by; to six digits where that is nothing. */
export function meanInWords(value: number, uncertainty: number): string {
  const decimals = 1 - Math.floor(Math.log10(uncertainty));
  if (!(decimals >= 0 && decimals <= 12)) return String(Number(value.toPrecision(6))).replace("-", "−");
  return value.toFixed(decimals).replace("-", "−");
}
