import type { RotorInputs } from "../../../orchestrator/contract/case-schema.ts";
import { AppError } from "../../../orchestrator/contract/index.ts";
import { radians } from "../vec3.ts";
import { interpolate } from "../wing/planform.ts";

/** Lift and drag of a blade section at an angle of attack. */
export interface SectionPolar {
  readonly cl: (alphaRad: number) => number;
  readonly cd: (alphaRad: number) => number;
  /** Angle of attack that gives a lift coefficient, on the branch below the stall, rad. */
  readonly alphaForCl: (cl: number) => number;
}

/**
 * The polar of a rotor: a table, linear in between and constant outside, or
 *
 *   cl = a (α - α0) within cl_min to cl_max, capped there; cd = cd0 + k cl²
 *
 * Limits: the cap keeps the lift beyond the stall and no dynamic stall is modelled, so loads of deeply stalled blades are
 * too high.
 *
 * @throws CASE_INVALID where the angles of a table do not rise
 */
export function sectionPolar(polar: RotorInputs["polar"], field: string): SectionPolar {
  if (polar.table !== null) return tablePolar(polar.table, field);
  const zero = radians(polar.zero_lift_deg);
  const slope = polar.lift_slope_per_rad;
  const cl = (alpha: number) => Math.min(polar.cl_max, Math.max(polar.cl_min, slope * (alpha - zero)));
  return {
    cl,
    cd: (alpha) => polar.cd0 + polar.cd_k * cl(alpha) ** 2,
    alphaForCl: (wanted) => zero + wanted / slope,
  };
}

function tablePolar(table: NonNullable<RotorInputs["polar"]["table"]>, field: string): SectionPolar {
  const late = table.findIndex((row, i) => i > 0 && row.alpha_deg <= table[i - 1]!.alpha_deg);
  if (late > 0) {
    throw new AppError(
      "CASE_INVALID",
      `the angle of row ${late + 1} of a polar (${table[late]!.alpha_deg} degrees) is not above the one before`,
      { where: `${field}.polar.table`, fix: "Give the rows with rising alpha_deg." },
    );
  }
  const alphas = table.map((row) => radians(row.alpha_deg));
  const cls = table.map((row) => row.cl);
  const cds = table.map((row) => row.cd);
  return {
    cl: (alpha) => interpolate(alphas, cls, alpha),
    cd: (alpha) => interpolate(alphas, cds, alpha),
    alphaForCl: (wanted) => firstAlpha(alphas, cls, wanted),
  };
}

/** Angle nearest to zero at which a tabulated cl is reached; the one of the nearest cl where it never is. */
function firstAlpha(alphas: readonly number[], cls: readonly number[], wanted: number): number {
  let best = alphas[0]!;
  let bestGap = Infinity;
  let bestSize = Infinity;
  for (let i = 0; i + 1 < alphas.length; i++) {
    const rise = cls[i + 1]! - cls[i]!;
    const t = rise === 0 ? 0 : Math.min(1, Math.max(0, (wanted - cls[i]!) / rise));
    const alpha = alphas[i]! + t * (alphas[i + 1]! - alphas[i]!);
    const gap = Math.abs(cls[i]! + t * rise - wanted);
    if (gap < bestGap - 1e-12 || (gap < bestGap + 1e-12 && Math.abs(alpha) < bestSize)) {
      best = alpha;
      bestGap = gap;
      bestSize = Math.abs(alpha);
    }
  }
  return best;
}
