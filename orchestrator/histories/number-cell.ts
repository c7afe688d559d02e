const NOT_A_NUMBER = /^[+-]?(nan(\(\w*\))?|1\.#(qnan|snan|ind)\d*)$/i;
const ENDLESS = /^([+-]?)(inf|infinity|1\.#inf\d*)$/i;
const DECIMAL = /^[+-]?(\d+\.?\d*|\.\d+)([eEdD][+-]?\d+)?$/;

/**
 * The number that a cell of a table holds: decimal notation, with Fortran's D for an exponent too, or one of the usual
 * spellings of NaN and infinity.
 *
 * @returns the number, or undefined where the cell holds something else (nothing, words, hexadecimal)
 */
export function numberCell(cell: string): number | undefined {
  const value = +cell;
  // The quick way out, for nearly every cell: a finite number that cannot come of an empty cell or of 0x, 0b, 0o.
  if (value !== 0 && Number.isFinite(value) && !isPrefixed(cell)) return value;
  const text = cell.trim();
  if (DECIMAL.test(text)) return +text.replace(/[dD]/, "e");
  if (NOT_A_NUMBER.test(text)) return Number.NaN;
  const endless = ENDLESS.exec(text);
  if (endless !== null) return endless[1] === "-" ? -Infinity : Infinity;
  return undefined;
}

/** Hexadecimal and its kin have a letter in second place, where a decimal number can only have an exponent's e. */
function isPrefixed(cell: string): boolean {
  const text = cell.charCodeAt(0) <= 0x20 ? cell.trim() : cell;
  const second = text.charCodeAt(1) | 0x20;
  return second === 0x78 || second === 0x62 || second === 0x6f;
}

/** Whether a cell looks like a number written with a decimal comma. */
export function hasDecimalComma(cell: string): boolean {
  return /^\s*[+-]?\d*,\d+([eE][+-]?\d+)?\s*$/.test(cell);
}
