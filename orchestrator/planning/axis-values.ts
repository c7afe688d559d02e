import type { CampaignAxis } from "../contract/campaign-schema.ts";
import { unitOfField, wordsOfField } from "./allowed-words.ts";
import type { FieldCatalogue } from "./field-catalogue.ts";
import { type FieldStep, type Inputs, parseFieldPath } from "./field-path.ts";

/** A value of an axis as it is printed and stored. */
export type AxisValue = string | number | boolean;

/** One setting of an axis: its value, how it is printed, and what it changes. */
export interface AxisSetting {
  readonly value: AxisValue;
  readonly label: string;
  readonly changes: Inputs;
  /** Where the value stands in the campaign file. */
  readonly at: readonly (string | number)[];
  /** Place along the axis, 0 at its first value to 1 at its last. */
  readonly position: number;
}

/** An axis with all its settings, or, where samples fill a range, with what makes them. */
export interface ResolvedAxis {
  readonly name: string;
  /** Place in the campaign's list of axes, from 0. */
  readonly index: number;
  readonly fields: readonly string[];
  readonly settings: readonly AxisSetting[];
  /** Setting at a place along the axis, 0 to below 1: the stretch of one listed value, or the value itself in a range. */
  readonly settingAt: (u: number) => AxisSetting;
}

/** Digits kept of computed values, so that 0.1 + 0.2 prints and hashes as 0.3. */
const DIGITS = 12;
/** Digits of sampled values: readable, and finer than any input is known. */
const SAMPLE_DIGITS = 6;

/** Resolves one axis into settings. Says nothing about whether they make sense: see check-axes.ts. */
export function resolveAxis(axis: CampaignAxis, index: number, catalogue: FieldCatalogue): ResolvedAxis {
  const fields = axisFields(axis);
  const first = fields[0] ?? "";
  const name = axis.name ?? axisName(first, catalogue);
  const unit = axis.unit ?? unitOfField(lastName(parseFieldPath(first === "" ? "case" : first)));
  const setting = (value: AxisValue, position: number, at: (string | number)[]): AxisSetting => ({
    value,
    label: valueLabel(name, value, unit),
    changes: Object.fromEntries(fields.map((field) => [field, value])),
    at: ["axes", index, ...at],
    position,
  });
  const settings = axis.settings
    ? axis.settings.map(({ name: value, set }, i, all) => ({
        value,
        label: value,
        changes: set,
        at: ["axes", index, "settings", i],
        position: placeOf(i, all.length),
      }))
    : listedValues(axis).map((value, i, all) =>
        setting(
          value,
          placeOf(i, all.length),
          axis.values ? ["values", i] : [axis.range ? "range" : "log_range"],
        ),
      );
  const settingAt = (u: number): AxisSetting => {
    const listed = settings[Math.min(settings.length - 1, Math.floor(u * settings.length))];
    return (
      listed ??
      setting(Number(spacedValue(axis, u).toPrecision(SAMPLE_DIGITS)), u, [
        axis.range ? "range" : "log_range",
      ])
    );
  };
  return { name, index, fields: settledFields(axis, fields), settings, settingAt };
}

/** Fields that an axis of values moves. */
export function axisFields(axis: CampaignAxis): readonly string[] {
  return axis.fields ?? (axis.field === undefined ? [] : [axis.field]);
}

function settledFields(axis: CampaignAxis, fields: readonly string[]): readonly string[] {
  if (axis.settings === undefined) return fields;
  return [...new Set(axis.settings.flatMap(({ set }) => Object.keys(set)))];
}

const placeOf = (i: number, count: number): number => (count < 2 ? 0.5 : i / (count - 1));

function listedValues(axis: CampaignAxis): readonly AxisValue[] {
  const count = axis.range?.count ?? axis.log_range?.count ?? 0;
  const spaced = () =>
    Array.from({ length: count }, (_, i) => Number(spacedValue(axis, placeOf(i, count)).toPrecision(DIGITS)));
  return axis.values ?? spaced();
}

function spacedValue(axis: CampaignAxis, u: number): number {
  if (axis.range !== undefined) return axis.range.from + u * (axis.range.to - axis.range.from);
  const { from, to } = axis.log_range ?? { from: 1, to: 1 };
  return from * (to / from) ** u;
}

function lastName(steps: readonly FieldStep[]): string {
  return String(steps.findLast((step) => typeof step === "string" && step !== "*") ?? "");
}

/** The field's own title, else its name in words; a field of one rotor of several says which. */
function axisName(field: string, catalogue: FieldCatalogue): string {
  const steps = parseFieldPath(field);
  const title = catalogue.nodesAt(steps).find((node) => node.title !== undefined)?.title;
  const words = title ?? wordsOfField(lastName(steps));
  const place = steps.findIndex((step) => typeof step === "number");
  if (place < 1) return words;
  const owner = String(steps[place - 1])
    .replaceAll("_", " ")
    .replace(/s$/, "");
  return `${owner} ${Number(steps[place]) + 1} ${words}`;
}

function valueLabel(name: string, value: AxisValue, unit: string | null): string {
  const printed = typeof value === "boolean" ? (value ? "yes" : "no") : String(value);
  return `${name} ${printed}${unit === null ? "" : ` ${unit}`}`;
}
