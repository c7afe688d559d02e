import { cpSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import type { LegRunner, Plan } from "../../orchestrator/contract/index.ts";
import {
  type NightEvent,
  type NightOptions,
  type NightSummary,
  startNight,
} from "../../orchestrator/night/index.ts";
import type { DataFolder } from "../../orchestrator/store/data-folder.ts";
import { openDataFolder } from "../../orchestrator/store/open-data-folder.ts";
import { createChildPool } from "../../workers/child-pool.ts";

/** Path of the module with the solvers of the tests. */
const TEST_SOLVERS = fileURLToPath(new URL("./test-simulations.ts", import.meta.url));

/** Children that know the tests' solvers. */
export function testPool(size = 2, memoryMegabytes = 512): LegRunner {
  return createChildPool({ size, memoryMegabytes, extraSolvers: TEST_SOLVERS });
}

/** Opens a folder without a word. */
export function openQuietly(dir: string): Promise<DataFolder> {
  return openDataFolder(dir, { onNotice: () => undefined, now: Date.now });
}

/**
 * Copies of an empty data folder: a fresh database takes seconds to make, so that one is made and the others are copies.
 *
 * @param path folder of the test file, in which the copies lie
 */
export function emptyFolders(path: string): (name: string) => Promise<string> {
  let made: Promise<string> | null = null;
  const make = async (): Promise<string> => {
    const template = join(path, "empty-template");
    await (await openQuietly(template)).close();
    return template;
  };
  return async (name) => {
    made ??= make();
    const dir = join(path, name);
    cpSync(await made, dir, { recursive: true });
    return dir;
  };
}

/** What a night came to, and what was to be seen of it. */
export interface WatchedNight {
  readonly summary: NightSummary;
  readonly events: readonly NightEvent[];
}

/** Runs a night to its end; `onEvent` may stop it. */
export async function wholeNight(
  folder: DataFolder,
  plan: Plan,
  runner: LegRunner,
  more: Partial<NightOptions> & { onStart?: (stop: () => void) => void } = {},
): Promise<WatchedNight> {
  const events: NightEvent[] = [];
  const { onEvent, onStart, ...options } = more;
  const night = await startNight({
    folder,
    plan,
    runner,
    now: Date.now,
    ...options,
    onEvent: (event) => {
      events.push(event);
      onEvent?.(event);
    },
  });
  onStart?.(() => void night.stop());
  return { summary: await night.done, events };
}
