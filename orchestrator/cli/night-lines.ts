import type { CliIo } from "./cli-io.ts";
import type { NightDisplay } from "./night-display.ts";
import { eventWords, tallyWords } from "./night-words.ts";

/** Least time between two lines that say how far the night is. */
const TALLY_MS = 30_000;

/** Progress as lines: what happened, and now and then how far the night is. */
export function nightLines(io: CliIo): NightDisplay {
  let toldMs = Number.NEGATIVE_INFINITY;
  let ended = false;
  return {
    show: (event, picture) => {
      if (ended) return;
      const words = eventWords(event);
      if (words !== null) io.stderr.write(`${words}\n`);
      const now = io.now();
      if (picture === null || event.kind !== "tally" || now.getTime() - toldMs < TALLY_MS) return;
      toldMs = now.getTime();
      io.stderr.write(`${tallyWords(picture, now)}\n`);
    },
    end: () => {
      ended = true;
    },
  };
}
