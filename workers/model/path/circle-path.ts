import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import { addScaled, cross, radians, scaled, type Vec3 } from "../vec3.ts";
import { windSpeed } from "../wind.ts";
import type { FlightPath } from "./flight-path.ts";

type Circle = Extract<Case["path"], { kind: "circle" }>;

/**
 * A circle across the wind. Its axis is the wind's direction tilted up by `tilt`; the upper side of the wing looks along
 * the axis, downwind, and the right tip outwards. The place is the angle θ from the horizontal +y, turning upwards.
 *
 *   dθ/dt = (V/R)(1 - ε sin θ),  V the mean over the angle
 *
 * which is the law of the true anomaly ν = θ + π/2 of an ellipse of eccentricity ε, uniform in its eccentric anomaly E:
 *
 *   ν = E + 2 atan(β sin E / (1 - β cos E)),  β = ε / (1 + √(1 - ε²)),  dE/dt = √(1 - ε²) V/R
 *
 * so that the place is exact at any time, without integration.
 *
 * @see any text on the two-body problem for the relation of the anomalies (from memory)
 */
export function circlePath(circle: Circle, wind: Case["wind"]): FlightPath {
  const tilt = radians(circle.tilt_deg);
  const axis: Vec3 = [Math.cos(tilt), 0, Math.sin(tilt)];
  const across: Vec3 = [0, 1, 0];
  const up = cross(axis, across);
  const radius = circle.radius_m;
  const variation = circle.speed_variation_percent / 100;
  const rest = Math.sqrt(1 - variation * variation);
  const beta = variation / (1 + rest);
  const start = eccentricAnomaly(radians(circle.start_deg) + Math.PI / 2, beta);
  const rate = (rest * circle.speed_mps) / radius;
  const windMps = windSpeed({ ...wind, gust: null }, 0, 0);
  return {
    poseAt: (timeSeconds) => {
      const e = start + rate * timeSeconds;
      const angle = e + 2 * Math.atan2(beta * Math.sin(e), 1 - beta * Math.cos(e)) - Math.PI / 2;
      const speed = circle.speed_mps * (1 - variation * Math.sin(angle));
      const outward = addScaled(scaled(across, Math.cos(angle)), up, Math.sin(angle));
      const forward = addScaled(scaled(across, -Math.sin(angle)), up, Math.cos(angle));
      return {
        position: scaled(outward, radius),
        velocity: scaled(forward, speed),
        forward,
        span: outward,
        normal: axis,
        spin: scaled(axis, speed / radius),
      };
    },
    designApparent: [-circle.speed_mps, 0, windMps * axis[0]],
    loopSeconds: (2 * Math.PI) / rate,
    varies: variation > 0 || (windMps !== 0 && (tilt !== 0 || wind.shear_exponent > 0)),
    lowestM: -radius * Math.cos(tilt),
  };
}

/** Eccentric anomaly of a true anomaly, on the branch of the latter: E = ν - 2 atan(β sin ν / (1 + β cos ν)). */
function eccentricAnomaly(trueAnomaly: number, beta: number): number {
  return trueAnomaly - 2 * Math.atan2(beta * Math.sin(trueAnomaly), 1 + beta * Math.cos(trueAnomaly));
}
