import { AppError, type Plan } from "../../orchestrator/contract/index.ts";
import type { CaseDescription, DescribeCase } from "../../orchestrator/planning/index.ts";
import { expandCampaign, type PlanningOptions, parseCampaign } from "../../orchestrator/planning/index.ts";

/** A description made of the inputs by simple rules, so that tests of planning do not depend on the model. */
export const plainDescription: DescribeCase = (inputs): CaseDescription => {
  const { numerics, rotors } = inputs as {
    numerics: { step_deg: number; rotor_wake_rows: number };
    rotors: readonly unknown[];
  };
  const load = (name: string) => ({ name, unit: "1", what: name, role: "load" as const });
  return {
    dtSeconds: numerics.step_deg / 360 / 10,
    stepsPerRevolution: 360 / numerics.step_deg,
    periods: rotors.length === 0 ? [] : [{ name: "blade passing", steps: 6 }],
    channels: [load("CN"), load("CL"), ...rotors.map((_, i) => load(`rotor${i + 1}.CT`))],
    wakeReturnSteps: null,
    pairsOver: (steps) => 1e4 * steps * (1 + rotors.length),
    warnings: [],
  };
};

/** A small campaign: two rotors, and whatever lines are added. */
export function campaignText(
  lines: string,
  accept = "{ channels: { CN: 1 % }, longest_revolutions: 40 }",
): string {
  return `campaign: Small
case:
  path: { kind: straight, speed_mps: 20 }
  wing: { span_m: 2.4, root_chord_m: 0.36, tip_chord_m: 0.24, pitch_deg: 5 }
  rotors:
    - &rotor { radius_m: 0.24, hub_radius_m: 0.04, tip_speed_ratio: 3.5 }
    - *rotor
accept: ${accept}
${lines}
`;
}

/** Expands a campaign's text with the plain description. */
export function planOf(text: string, options: Partial<PlanningOptions> = {}): Plan {
  const defaults = { describe: plainDescription, modelVersion: "test", pairsPerSecond: 1e6, cores: 2 };
  return expandCampaign(parseCampaign(text, "small.yaml"), { ...defaults, ...options });
}

/** The refusal that planning a text ends in. */
export function refusalOf(text: string, options: Partial<PlanningOptions> = {}): AppError {
  try {
    planOf(text, options);
  } catch (error) {
    if (error instanceof AppError) return error;
    throw error;
  }
  throw new Error("nothing was refused");
}
