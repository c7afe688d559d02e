import type { CampaignFile } from "../contract/campaign-schema.ts";
import type { AxisSetting, AxisValue, ResolvedAxis } from "./axis-values.ts";
import { sobolPoints } from "./sobol.ts";

/** One combination of the axes: a setting of each, in the order of the axes. */
export type SweepPoint = readonly AxisSetting[];

/** Every point of the sweep in file order, the last axis moving fastest. Paired axes have to be of one length. */
export function sweepPoints(axes: readonly ResolvedAxis[], combine: CampaignFile["combine"]): SweepPoint[] {
  if (axes.length === 0) return [[]];
  if (typeof combine === "object") return spaceFilling(axes, combine.space_filling);
  if (combine === "paired") return axes[0]!.settings.map((_, i) => axes.map((axis) => axis.settings[i]!));
  return axes.reduce<AxisSetting[][]>(
    (points, axis) => points.flatMap((point) => axis.settings.map((setting) => [...point, setting])),
    [[]],
  );
}

/**
 * Samples of Sobol's sequence, moved by half a cell so that none lies on the lower edge of every axis. The same file
 * always gives the same samples.
 */
function spaceFilling(axes: readonly ResolvedAxis[], count: number): SweepPoint[] {
  const half = 0.5 / 2 ** Math.ceil(Math.log2(Math.max(1, count)));
  return sobolPoints(count, axes.length).map((point) =>
    axes.map((axis, i) => axis.settingAt(point[i]! + half)),
  );
}

type Condition = CampaignFile["leave_out"][number]["when"][string];

/** Whether a value of an axis meets a condition: equal, one of a list, or within bounds, both included. */
export function meetsCondition(value: AxisValue, condition: Condition): boolean {
  if (Array.isArray(condition)) return condition.some((one) => sameValue(value, one));
  if (typeof condition !== "object") return sameValue(value, condition);
  if (typeof value !== "number") return false;
  return value >= (condition.from ?? -Infinity) && value <= (condition.to ?? Infinity);
}

/** Equal, numbers to ten digits: 0.3 given by hand is meant where a range comes to 0.30000000000000004. */
function sameValue(a: AxisValue, b: AxisValue): boolean {
  if (typeof a !== "number" || typeof b !== "number") return a === b;
  return Math.abs(a - b) <= 1e-10 * Math.max(Math.abs(a), Math.abs(b));
}
