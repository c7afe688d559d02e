import { AppError } from "../contract/index.ts";
import type { DataFolder } from "../store/data-folder.ts";
import type { Registration } from "../store/store.ts";
import type { Night, NightOptions } from "./api.ts";
import { NightWork } from "./night-work.ts";
import { resolveDeadline } from "./resolve-deadline.ts";

/** Nights going on, by the folder that they write. */
const nights = new WeakMap<DataFolder, { readonly campaign: string; readonly night: Night }>();

/** The night that goes on in a folder that this process holds; null for none. */
export function nightIn(folder: DataFolder): { readonly campaign: string; readonly night: Night } | null {
  return nights.get(folder) ?? null;
}

/**
 * Begins a night: puts the campaign into the store or takes it up where it was, rebuilds the queue, and works until all
 * is done, the deadline comes, or somebody stops it.
 *
 * @throws STATE_CONFLICT while another night goes on in the folder
 */
export async function startNight(options: NightOptions): Promise<Night> {
  const { folder, plan, now, onEvent } = options;
  const other = nights.get(folder);
  if (other !== undefined)
    throw new AppError("STATE_CONFLICT", `the night of campaign "${other.campaign}" still goes on`, {
      where: plan.campaign,
      fix: "Wait for it, or stop it first.",
    });
  const deadlineMs = resolveDeadline(plan.deadline, now());
  const queue = await folder.legQueue();
  for (const words of registrationWords(await folder.store.register(plan, now())))
    onEvent({ kind: "notice", words });
  await folder.store.setStanding(plan.campaign, "running", deadlineMs);
  const { list } = await folder.store.campaignState(plan.campaign);
  const work = new NightWork(options, { queue, runs: list, deadlineMs });
  const night: Night = {
    done: work.done.finally(() => nights.delete(folder)),
    stop: () => {
      work.stop();
      return night.done;
    },
  };
  // Whoever starts a night awaits `done`; a rejection before that moment must not end the process.
  night.done.catch(() => undefined);
  nights.set(folder, { campaign: plan.campaign, night });
  await work.begin();
  return night;
}

function registrationWords({ isNew, added, rejudged, dropped }: Registration): string[] {
  if (isNew) return [];
  const words: string[] = [];
  if (added > 0) words.push(`${added} runs are new in the campaign`);
  if (rejudged > 0) words.push(`${rejudged} runs are judged anew, since the rules for them changed`);
  if (dropped > 0) words.push(`${dropped} runs are no longer part of the campaign; their histories are kept`);
  return words;
}
