import type { CampaignFile } from "../contract/campaign-schema.ts";
import type { AcceptRule, ChannelInfo, OnsetRule, Tolerance } from "../contract/index.ts";
import { nameList, nearestName } from "./nearest-name.ts";
import type { Campaign } from "./parse-campaign.ts";
import type { Problem } from "./problem.ts";

/** Reads a tolerance that has passed the schema: a number is absolute, "0.5 % of mean" is percent. */
export function readTolerance(given: number | string): Tolerance {
  return typeof given === "number" ? { absolute: given } : { percent: Number.parseFloat(given) };
}

/** Acceptance rule of a campaign, channels in the order of the file. */
export function readAccept({ accept }: CampaignFile): AcceptRule {
  const channels = Object.entries(accept.channels).map(([name, given]) => ({
    name,
    tolerance: readTolerance(given),
  }));
  return { channels, confidence: accept.confidence };
}

/** Onset rule of a campaign. */
export function readOnset({ onset }: CampaignFile): OnsetRule {
  const bounds = Object.entries(onset.bounds).map(([name, { min, max }]) => [
    name,
    { ...(min !== undefined && { min }), ...(max !== undefined && { max }) },
  ]);
  return { channels: onset.channels, sensitivity: onset.sensitivity, bounds: Object.fromEntries(bounds) };
}

/** Channels named in the campaign that no run has. */
export function channelProblems(campaign: Campaign, channels: ReadonlyMap<string, ChannelInfo>): Problem[] {
  const { accept, onset } = campaign.file;
  const named = [
    ...Object.keys(accept.channels).map((name) => ({ name, at: ["accept", "channels", name] })),
    ...(onset.channels === "all"
      ? []
      : onset.channels.map((name, i) => ({ name, at: ["onset", "channels", i] }))),
    ...Object.keys(onset.bounds).map((name) => ({ name, at: ["onset", "bounds", name] })),
  ];
  const valid = [...channels.keys()];
  return named
    .filter(({ name }) => !channels.has(name))
    .map(({ name, at }): Problem => {
      const near = nearestName(name, valid);
      return {
        place: campaign.placeOf(at),
        field: at.map((step) => (typeof step === "number" ? step + 1 : step)).join("."),
        words: `no run has a channel called "${name}"`,
        instead: near === null ? `there are: ${nameList(valid, 30)}` : `did you mean ${near}?`,
      };
    });
}

/** Identifier made of the campaign's name: lower case, digits and hyphens. */
export function campaignSlug(campaign: Campaign): string {
  const plain = campaign.file.campaign.normalize("NFKD").replaceAll(/\p{M}/gu, "").toLowerCase();
  return plain
    .replaceAll(/[^a-z0-9]+/g, "-")
    .slice(0, 60)
    .replaceAll(/^-+|-+$/g, "");
}
