import type { SchemaNode } from "./field-catalogue.ts";
import { nameList } from "./nearest-name.ts";

/** Last words of field names that are units, as they are printed. */
const UNITS: Readonly<Record<string, string>> = {
  m: "m",
  m2: "m²",
  mps: "m/s",
  mps2: "m/s²",
  m2ps: "m²/s",
  deg: "deg",
  degps: "deg/s",
  rad: "rad",
  radps: "rad/s",
  s: "s",
  hz: "Hz",
  rpm: "1/min",
  kg: "kg",
  kgpm3: "kg/m³",
  n: "N",
  nm: "N m",
  pa: "Pa",
  steps: "steps",
  rows: "rows",
  revolutions: "revolutions",
  spans: "spans",
  percent: "%",
  chords: "chords",
  radii: "radii",
};

/** Words that the trade writes with a hyphen. */
const COMPOUNDS: readonly (readonly [string, string])[] = [["tip speed", "tip-speed"]];

/** Unit that a field's name carries, as printed; null where it carries none. */
export function unitOfField(field: string): string | null {
  const per = /.+_per_([a-z0-9]+)$/.exec(field);
  if (per !== null) return `1/${UNITS[per[1]!] ?? per[1]}`;
  const cut = field.lastIndexOf("_");
  return cut < 1 ? null : (UNITS[field.slice(cut + 1)] ?? null);
}

/** Field's name in words, without its unit: `tip_speed_ratio` is "tip-speed ratio", `above_m` is "above". */
export function wordsOfField(field: string): string {
  const bare = unitOfField(field) === null ? field : field.replace(/(_per)?_[^_]*$/, "");
  return COMPOUNDS.reduce(
    (words, [apart, joined]) => words.replace(apart, joined),
    bare.replaceAll("_", " "),
  );
}

/** What a field takes, in words: kind, range and unit. */
export function allowedWords(nodes: readonly SchemaNode[], field: string): string {
  const unit = unitOfField(field);
  const words = [...new Set(nodes.map((node) => nodeWords(node, unit)).filter((w) => w !== ""))];
  return words.length === 0 ? "another value" : words.join(", or ");
}

function nodeWords(node: SchemaNode, unit: string | null): string {
  if (node.const !== undefined) return String(node.const);
  if (node.enum !== undefined) return `one of ${nameList(node.enum.map(String), 20)}`;
  switch (node.type) {
    case "number":
      return `a number${rangeWords(node, unit)}`;
    case "integer":
      return `a whole number${rangeWords(node, unit)}`;
    case "string":
      return "text";
    case "boolean":
      return "true or false";
    case "array":
      return `a list${countWords(node)}`;
    case "object": {
      const names = Object.keys(node.properties ?? {});
      return names.length === 0 ? "a block of fields" : `a block of fields (${nameList(names)})`;
    }
    default:
      return "";
  }
}

/** Integer bounds that only say that a number is an integer. */
const isBound = (x: number | undefined): x is number =>
  x !== undefined && Math.abs(x) < Number.MAX_SAFE_INTEGER;

function rangeWords(node: SchemaNode, unit: string | null): string {
  const low = isBound(node.minimum) ? `${node.minimum}` : null;
  const above = isBound(node.exclusiveMinimum) ? `${node.exclusiveMinimum}` : null;
  const high = isBound(node.maximum) ? `${node.maximum}` : null;
  const below = isBound(node.exclusiveMaximum) ? `${node.exclusiveMaximum}` : null;
  const inUnit = unit === null ? "" : ` ${unit}`;
  const from = low !== null ? ` from ${low}` : above !== null ? ` above ${above}` : "";
  const to = high !== null ? ` to ${high}` : below !== null ? ` below ${below}` : "";
  if (from === "" && to === "") return unit === null ? "" : ` in ${unit}`;
  if (low !== null && high === null && below === null) return ` of at least ${low}${inUnit}`;
  if (from === "" && high !== null) return ` of at most ${high}${inUnit}`;
  return `${from}${above !== null && high !== null ? `, up to ${high}` : to}${inUnit}`;
}

function countWords(node: SchemaNode): string {
  if (node.minItems !== undefined && node.maxItems !== undefined)
    return node.minItems === node.maxItems
      ? ` of ${node.minItems}`
      : ` of ${node.minItems} to ${node.maxItems}`;
  if (node.minItems !== undefined) return ` of at least ${node.minItems}`;
  return node.maxItems === undefined ? "" : ` of at most ${node.maxItems}`;
}

/** A value as it was given, short enough for a sentence. */
export function givenWords(value: unknown): string {
  if (value === undefined) return "nothing";
  if (value === null) return "nothing (empty)";
  if (Array.isArray(value)) return value.length === 0 ? "an empty list" : `a list of ${value.length}`;
  if (typeof value === "object") return `a block (${nameList(Object.keys(value), 4)})`;
  if (typeof value === "string") return `"${printable(value, 60)}"`;
  return String(value);
}

/** Text without control characters, cut to a length. */
export function printable(value: string, most: number): string {
  const clean = value.replaceAll(/\p{Cc}+/gu, " ");
  return clean.length > most ? `${clean.slice(0, most - 1)}…` : clean;
}
