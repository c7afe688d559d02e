import { distance } from "fastest-levenshtein";

/**
 * The valid name that was probably meant, or null where nothing is near. A name that differs in its unit only
 * (`span_ft` for `span_m`) is the nearest there can be.
 */
export function nearestName(given: string, valid: readonly string[]): string | null {
  const wanted = given.slice(0, 100).toLowerCase();
  const sameButUnit = valid.find((name) => stem(name) === stem(wanted) && stem(wanted) !== "");
  if (sameButUnit !== undefined) return sameButUnit;
  let best: string | null = null;
  let bestDistance = Math.max(2, Math.floor(wanted.length * 0.4)) + 1;
  for (const name of valid) {
    const d = distance(wanted, name.toLowerCase());
    if (d < bestDistance) [best, bestDistance] = [name, d];
  }
  return best;
}

/** Name without its last word, which is the unit where the name carries one: `span_m` is `span`. */
function stem(name: string): string {
  const lower = name.toLowerCase().replaceAll("-", "_");
  const cut = lower.lastIndexOf("_");
  return cut > 0 ? lower.slice(0, cut) : lower;
}

/** A list of names for a sentence, the first few of a long one. */
export function nameList(names: readonly string[], most = 12): string {
  if (names.length === 0) return "none";
  const shown = names.slice(0, most).join(", ");
  return names.length > most ? `${shown} and ${names.length - most} more` : shown;
}
