import { randomBytes } from "node:crypto";
import {
  createApp,
  folderAnswers,
  type LiveNight,
  nextPicture,
  type Serving,
  serveApp,
} from "../../api/http/index.ts";
import type { LegRunner, Plan } from "../contract/index.ts";
import { type Night, type NightOptions, type NightSummary, startNight } from "../night/index.ts";
import type { DataFolder } from "../store/data-folder.ts";
import { removeServerFile, writeServerFile } from "../store/server-file.ts";
import type { CliIo } from "./cli-io.ts";
import { nightDisplay } from "./night-display.ts";

/** Everything a night in the foreground is made of. */
export interface WatchOptions {
  readonly plan: Plan;
  readonly folder: DataFolder;
  /** Makes what computes the legs; told where to say what happens to its processes. */
  readonly makeRunner: (onNotice: (words: string) => void) => LegRunner;
}

/** Runs a night in the foreground: shows it, answers other commands, and stops when interrupted. */
export async function watchNight(
  { plan, folder, makeRunner }: WatchOptions,
  io: CliIo,
): Promise<NightSummary> {
  let picture: LiveNight | null = null;
  let night: Night | null = null;
  let interrupted = false;
  const display = nightDisplay(io);
  const unsubscribe = io.onInterrupt(() => {
    interrupted = true;
    display.show({ kind: "notice", words: "Stopping: what runs is checkpointed." }, picture);
    // `done` below tells of a failure.
    night?.stop().catch(() => {});
  });
  const runner = makeRunner((words) => display.show({ kind: "notice", words }, picture));
  const options: NightOptions = {
    folder,
    plan,
    runner,
    now: () => io.now().getTime(),
    onEvent: (event) => {
      picture = nextPicture(picture, event);
      display.show(event, picture);
    },
  };
  let serving: Serving | null = null;
  try {
    serving = await serveFolder(folder, () => picture, io);
    night = await startNight(options);
    if (interrupted) night.stop().catch(() => {});
    return await night.done;
  } finally {
    unsubscribe();
    display.end();
    removeServerFile(folder.dir);
    await serving?.close();
    await runner.close();
  }
}

async function serveFolder(folder: DataFolder, picture: () => LiveNight | null, io: CliIo): Promise<Serving> {
  const token = randomBytes(24).toString("hex");
  const answers = folderAnswers(folder, picture);
  const onBug = (error: unknown) =>
    io.stderr.write(`${error instanceof Error ? error.stack : String(error)}\n`);
  const serving = await serveApp(createApp({ answers, token, onBug }), { host: "127.0.0.1", port: 0 });
  writeServerFile(folder.dir, { pid: process.pid, port: serving.port, token });
  return serving;
}
