import type { LiveNight } from "../../api/http/index.ts";
import type { NightEvent } from "../night/index.ts";
import type { CliIo } from "./cli-io.ts";
import { nightBars } from "./night-bars.ts";
import { nightLines } from "./night-lines.ts";

/** Shows a night while it goes on. */
export interface NightDisplay {
  /** `picture` is the night after the event. */
  show(event: NightEvent, picture: LiveNight | null): void;
  /** Takes away what moves; nothing is shown from then on. */
  end(): void;
}

/** Bars where a terminal shows them, plain lines where a file or another program reads along. */
export function nightDisplay(io: CliIo): NightDisplay {
  return io.stderr.isTTY === true ? nightBars(io) : nightLines(io);
}
