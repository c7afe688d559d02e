import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import { AppError } from "../../../orchestrator/contract/index.ts";
import { addScaled, cross, dot, norm, scaled, unit, type Vec3 } from "../vec3.ts";
import { windSpeed } from "../wind.ts";
import { cubicSpline } from "./cubic-spline.ts";
import type { FlightPath } from "./flight-path.ts";

type Table = Extract<Case["path"], { kind: "table" }>;

/** Places along the table at which the path is checked and averaged. */
const LOOKS = 512;
/** Smallest sine of the angle between the flight direction and the wing's wanted normal; 0.1 is about 6 degrees. */
const LEAST_SINE = 0.1;
/** Part of the shortest interval over which the turning of the axes is differenced. */
const DIFFERENCE = 1e-4;

/**
 * A path through given positions: cubic splines in time. The upper side of the wing looks downwind or up, as far as the
 * flight direction lets it; after the last point of an open table the flight goes on straight.
 *
 * @throws CASE_INVALID where times do not rise from 0, a closed path does not close, the wing stands still, or it flies
 *   along the direction in which its upper side is to look
 */
export function tablePath(table: Table, wind: Case["wind"]): FlightPath {
  checkTimes(table);
  const times = table.points.map((point) => point.time_s);
  const splines = (["x_m", "y_m", "z_m"] as const).map((key) =>
    cubicSpline(
      times,
      table.points.map((point) => point[key]),
      table.closed,
    ),
  );
  const wanted: Vec3 = table.normal === "up" ? [0, 0, 1] : [1, 0, 0];
  const position = (t: number) => splines.map((s) => s.valueAt(t)) as unknown as Vec3;
  const velocity = (t: number) => splines.map((s) => s.slopeAt(t)) as unknown as Vec3;
  const axes = (t: number) => axesOf(velocity(t), wanted, t);
  const shortest = Math.min(...times.slice(1).map((t, i) => t - times[i]!));
  const h = DIFFERENCE * shortest;
  const total = times.at(-1)!;
  const looks = Array.from({ length: LOOKS }, (_, i) => ((i + 0.5) / LOOKS) * total);
  return {
    poseAt: (t) => ({
      position: position(t),
      velocity: velocity(t),
      ...axes(t),
      spin: spinOf(axes(t - h), axes(t), axes(t + h), 2 * h),
    }),
    designApparent: meanApparent(looks, velocity, axes, windSpeed({ ...wind, gust: null }, 0, 0)),
    loopSeconds: table.closed ? total : null,
    varies: true,
    lowestM: Math.min(...looks.map((t) => position(t)[2])),
  };
}

type Axes = { readonly forward: Vec3; readonly span: Vec3; readonly normal: Vec3 };

function axesOf(velocity: Vec3, wanted: Vec3, timeSeconds: number): Axes {
  const speed = norm(velocity);
  const forward = scaled(velocity, 1 / speed);
  const square = addScaled(wanted, forward, -dot(wanted, forward));
  if (!(speed > 0) || norm(square) < LEAST_SINE) {
    const why = speed > 0 ? "flies along the direction in which its upper side is to look" : "stands still";
    throw invalid(
      `the wing ${why} at ${timeSeconds.toPrecision(4)} s`,
      "Change the points there, or set path.normal to the other of downwind and up.",
    );
  }
  const normal = unit(square);
  return { forward, span: cross(forward, normal), normal };
}

/** Angular velocity ½ Σ e × de/dt of an orthonormal triad. */
function spinOf(before: Axes, now: Axes, after: Axes, dt: number): Vec3 {
  return (["forward", "span", "normal"] as const).reduce<Vec3>(
    (sum, key) => addScaled(sum, cross(now[key], addScaled(after[key], before[key], -1)), 0.5 / dt),
    [0, 0, 0],
  );
}

function meanApparent(
  looks: readonly number[],
  velocity: (t: number) => Vec3,
  axes: (t: number) => Axes,
  windMps: number,
): Vec3 {
  let sum: Vec3 = [0, 0, 0];
  for (const t of looks) {
    const air = addScaled([windMps, 0, 0], velocity(t), -1);
    const { forward, span, normal } = axes(t);
    sum = addScaled(sum, [dot(air, forward), dot(air, span), dot(air, normal)], 1 / looks.length);
  }
  return sum;
}

function checkTimes({ points, closed }: Table): void {
  const late = points.findIndex((point, i) => i > 0 && point.time_s <= points[i - 1]!.time_s);
  if (points[0]!.time_s !== 0 || late > 0) {
    throw invalid(
      late > 0
        ? `the time of point ${late + 1} (${points[late]!.time_s} s) is not after the one before`
        : `the first point stands at ${points[0]!.time_s} s`,
      "Give the points in order, with times that rise from 0.",
    );
  }
  const [first, last] = [points[0]!, points.at(-1)!];
  const gap = Math.hypot(last.x_m - first.x_m, last.y_m - first.y_m, last.z_m - first.z_m);
  if (closed && gap > 1e-9) {
    throw invalid(
      `a closed path ends ${gap} m from where it began`,
      "Repeat the first position as the last point, or set path.closed to false.",
    );
  }
}

const invalid = (what: string, fix: string) =>
  new AppError("CASE_INVALID", what, { where: "path.points", fix });
