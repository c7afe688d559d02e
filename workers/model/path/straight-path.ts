import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import { windSpeed } from "../wind.ts";
import type { FlightPath } from "./flight-path.ts";

/** Straight flight against +x at constant speed, upper side up, right tip towards +y. */
export function straightPath(speedMps: number, wind: Case["wind"]): FlightPath {
  return {
    poseAt: (timeSeconds) => ({
      position: [-speedMps * timeSeconds, 0, 0],
      velocity: [-speedMps, 0, 0],
      forward: [-1, 0, 0],
      span: [0, 1, 0],
      normal: [0, 0, 1],
      spin: [0, 0, 0],
    }),
    designApparent: [-(speedMps + windSpeed({ ...wind, gust: null }, 0, 0)), 0, 0],
    loopSeconds: null,
    varies: false,
    lowestM: 0,
  };
}
