import { AppError } from "../contract/index.ts";

/** Steps of a field path: a field's name, a place in a list counted from 0, or every place of a list. */
export type FieldStep = string | number | "*";

/** Plain values as JSON holds them, in blocks. */
export type Inputs = Readonly<Record<string, unknown>>;

const STEPS_MAX = 12;
/** Names that reach an object's prototype are no fields. */
const FORBIDDEN = ["__proto__", "constructor", "prototype"];

/**
 * Reads a field path as a person writes it, `wing.span_m`, `rotors.1.above_m` (the first rotor: places are counted from
 * 1, as in channel names) or `rotors.*.above_m` (every rotor).
 *
 * @throws CASE_INVALID where the path cannot be one
 */
export function parseFieldPath(text: string): readonly FieldStep[] {
  const parts = text.split(".");
  if (parts.length > STEPS_MAX || parts.some((part) => part.trim() === "" || FORBIDDEN.includes(part)))
    throw new AppError("CASE_INVALID", `"${text.slice(0, 120)}" is no field path`, {
      fix: "Write the names from the case downwards with dots between, like wing.span_m or rotors.*.above_m.",
    });
  return parts.map((part) => (/^\d+$/.test(part) ? Number(part) - 1 : part));
}

/** The path as a person writes it, from steps counted from 0. */
export function writeFieldPath(steps: readonly PropertyKey[]): string {
  return steps.map((step) => (typeof step === "number" ? step + 1 : String(step))).join(".");
}

/** Every concrete path that a path with `*` stands for in these inputs; none where a list on the way is empty. */
export function matchFieldPath(inputs: Inputs, steps: readonly FieldStep[]): (string | number)[][] {
  let found: { path: (string | number)[]; value: unknown }[] = [{ path: [], value: inputs }];
  for (const step of steps)
    found = found.flatMap(({ path, value }) =>
      stepsInto(value, step).map((to) => ({ path: [...path, to.key], value: to.value })),
    );
  return found.map(({ path }) => path);
}

function stepsInto(value: unknown, step: FieldStep): { key: string | number; value: unknown }[] {
  if (Array.isArray(value)) {
    if (step === "*") return value.map((item, key) => ({ key, value: item }));
    return typeof step === "number" && step >= 0 && step < value.length
      ? [{ key: step, value: value[step] }]
      : [];
  }
  if (typeof value === "object" && value !== null && typeof step === "string" && step !== "*")
    return [{ key: step, value: ownValue(value, step) }];
  // A field below one that is not given yet: the block is made when the value is set.
  if (value === undefined && typeof step === "string" && step !== "*")
    return [{ key: step, value: undefined }];
  return [];
}

/** Value at a concrete path; undefined where there is none. */
export function valueAt(inputs: unknown, path: readonly (string | number)[]): unknown {
  let value = inputs;
  for (const key of path) {
    if (typeof value !== "object" || value === null) return undefined;
    value = ownValue(value, key);
  }
  return value;
}

function ownValue(block: object, key: string | number): unknown {
  return Object.hasOwn(block, key) ? (block as Record<string | number, unknown>)[key] : undefined;
}

/**
 * Inputs with changes applied in order: field path to value. A list or single value is replaced; a block changes only the
 * fields that it names, unless it names another `kind`, which replaces it. A path with `*` over an empty list changes nothing.
 */
export function applyChanges(inputs: Inputs, changes: Inputs): Inputs {
  let result: unknown = inputs;
  for (const [text, value] of Object.entries(changes))
    for (const path of matchFieldPath(result as Inputs, parseFieldPath(text)))
      result = withValue(result, path, value);
  return result as Inputs;
}

function withValue(target: unknown, path: readonly (string | number)[], value: unknown): unknown {
  const [key, ...rest] = path;
  if (key === undefined) return merged(target, value);
  if (Array.isArray(target))
    return target.map((item, i) => (i === key ? withValue(item, rest, value) : item));
  const block = isBlock(target) ? target : {};
  return { ...block, [key]: withValue(ownValue(block, key), rest, value) };
}

function merged(target: unknown, value: unknown): unknown {
  if (!isBlock(target) || !isBlock(value)) return value;
  const otherKind = Object.hasOwn(value, "kind") && value.kind !== ownValue(target, "kind");
  if (otherKind) return value;
  const result: Record<string, unknown> = { ...target };
  for (const [key, item] of Object.entries(value)) result[key] = merged(ownValue(target, key), item);
  return result;
}

function isBlock(value: unknown): value is Record<string, unknown> {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}
