// From a campaign file to a plan: parse-yaml.ts and parse-campaign.ts read it, expand-campaign.ts makes the runs (drafts,
// checked inputs, content ids, baselines, companions), night-order.ts says in which order. Nothing here runs anything, keeps
// anything, or knows the model: what the solver says of a case is passed in. Read expand-campaign.ts first.
export { campaignJsonSchema } from "./campaign-json-schema.ts";
export type { CaseDescription, DescribeCase } from "./case-description.ts";
export { countRuns, RUNS_MAX, RUNS_WITHOUT_ASKING } from "./count-runs.ts";
export { expandCampaign, type PlanningOptions } from "./expand-campaign.ts";
export { type Campaign, parseCampaign } from "./parse-campaign.ts";
export { secondsUntil } from "./predict-cost.ts";
export { readCampaign } from "./read-campaign.ts";
