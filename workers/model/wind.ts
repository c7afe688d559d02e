import type { Case } from "../../orchestrator/contract/case-schema.ts";

/** Height below which the power law is not followed down, m: it would fall to zero at the ground. */
const LOWEST_M = 0.1;

/**
 * Speed of the undisturbed wind along +x: power law with height, plus a uniform gust of one-minus-cosine shape.
 *
 *   W(z, t) = W_ref ((h_centre + z) / h_ref)^p + ½ peak (1 - cos 2π(t - t0)/d),  the gust for t0 < t < t0 + d only
 *
 * @param z height above the origin of the path, m
 * @returns m/s
 */
export function windSpeed(wind: Case["wind"], z: number, timeSeconds: number): number {
  const height = Math.max(LOWEST_M, wind.centre_height_m + z);
  const shear = wind.shear_exponent === 0 ? 1 : (height / wind.reference_height_m) ** wind.shear_exponent;
  return wind.speed_mps * shear + gustSpeed(wind.gust, timeSeconds);
}

function gustSpeed(gust: Case["wind"]["gust"], timeSeconds: number): number {
  if (gust === null) return 0;
  const phase = (timeSeconds - gust.start_s) / gust.duration_s;
  if (phase <= 0 || phase >= 1) return 0;
  return 0.5 * gust.peak_mps * (1 - Math.cos(2 * Math.PI * phase));
}
