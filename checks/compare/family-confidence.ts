import { AppError } from "../../orchestrator/contract/index.ts";

/** Bonferroni holds for any dependence; Šidák for independent channels and for two-sided intervals of jointly normal means. */
export type FamilyRule = "bonferroni" | "sidak";

/**
 * Confidence that each of several intervals has to have, so that all of them hold together at the family's confidence.
 *
 *   Bonferroni:  1 − (1 − C)/m
 *   Šidák:       C^(1/m)
 *
 * Bonferroni is the default: it needs no assumption, and at the usual confidences the gain of Šidák is below 3 % of the
 * allowed misses.
 *
 * Limits: both are wide for channels that move together (normal force and lift); neither is ever too narrow within its assumption.
 *
 * @param family confidence of the family, in (0, 1)
 * @param channels whole number >= 1
 * @returns in [family, 1)
 * @throws USAGE for arguments out of range
 * @see Bonferroni's inequality; Šidák (1967), Rectangular confidence regions for the means of multivariate normal distributions
 */
export function confidencePerChannel(
  family: number,
  channels: number,
  rule: FamilyRule = "bonferroni",
): number {
  refuseBadFamily(family, channels);
  if (rule === "sidak") return Math.exp(Math.log(family) / channels);
  return 1 - (1 - family) / channels;
}

/**
 * Confidence that several intervals of one confidence each hold together: the inverse of `confidencePerChannel`.
 *
 * @param each confidence of each interval, in (0, 1)
 * @returns in [0, each]; 0 where Bonferroni promises nothing
 * @throws USAGE for arguments out of range
 */
export function confidenceOfFamily(each: number, channels: number, rule: FamilyRule = "bonferroni"): number {
  refuseBadFamily(each, channels);
  return rule === "sidak" ? each ** channels : Math.max(0, 1 - channels * (1 - each));
}

function refuseBadFamily(confidence: number, channels: number): void {
  if (!(confidence > 0 && confidence < 1))
    throw new AppError("USAGE", `a confidence of ${confidence} can't be shared out`, {
      fix: "give one between 0 and 1",
    });
  if (!(Number.isInteger(channels) && channels >= 1))
    throw new AppError("USAGE", `a confidence can't be shared out over ${channels} channels`, {
      fix: "give a whole number of channels, at least one",
    });
}
