// A server process for tests that kill it: holds a folder, runs one night of test processes, and says on its standard
// output where it is, one JSON line each. With `holdAt` it waits at that place for its end.
import type { Plan } from "../../orchestrator/contract/index.ts";
import { startNight } from "../../orchestrator/night/index.ts";
import type { DataFolder } from "../../orchestrator/store/data-folder.ts";
import { openDataFolder } from "../../orchestrator/store/open-data-folder.ts";
import { testPool } from "./test-night.ts";

/** Where a night can be met. */
export type Place = "opening" | "open" | "begun" | "in-leg" | "before-commit" | "after-commit";

/** What the process is told. */
export interface NightProcessOptions {
  readonly dir: string;
  readonly plan: Plan;
  readonly legSeconds: number;
  readonly workers: number;
  /** Where to wait for ever, at the nth time that the place is reached. */
  readonly holdAt: { readonly place: Place; readonly time: number } | null;
}

const options = JSON.parse(process.argv[2]!) as NightProcessOptions;
const seen = new Map<Place, number>();

function reached(place: Place): boolean {
  const time = (seen.get(place) ?? 0) + 1;
  seen.set(place, time);
  const held = options.holdAt?.place === place && options.holdAt.time === time;
  process.stdout.write(`${JSON.stringify({ place, time, held })}\n`);
  return held;
}

async function at(place: Place): Promise<void> {
  if (reached(place)) await new Promise(() => setInterval(() => undefined, 1000));
}

/** Seconds of a busy wait: the process does not get further before it is killed. */
function waitHere(): void {
  const until = performance.now() + 30_000;
  while (performance.now() < until);
}

const folder = await openDataFolder(options.dir, {
  onNotice: () => {
    if (reached("opening")) waitHere();
  },
  now: Date.now,
});
await at("open");
const held: DataFolder = {
  ...folder,
  store: {
    ...folder.store,
    commit: async (leg) => {
      await at("before-commit");
      const outcome = await folder.store.commit(leg);
      await at("after-commit");
      return outcome;
    },
  },
};
const runner = testPool(options.workers);
const night = await startNight({
  folder: held,
  plan: options.plan,
  runner,
  now: Date.now,
  legSeconds: options.legSeconds,
  onEvent: (event) => {
    if (event.kind === "begun" && reached("begun")) waitHere();
    if (event.kind === "progress" && event.step > 0 && reached("in-leg")) waitHere();
  },
});
const summary = await night.done;
await runner.close();
await folder.close();
process.stdout.write(`${JSON.stringify({ place: "end", summary })}\n`);
