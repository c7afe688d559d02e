import { MultiBar, type SingleBar } from "cli-progress";
import type { LiveNight, WorkerPicture } from "../../api/http/index.ts";
import type { CliIo } from "./cli-io.ts";
import { formatDuration } from "./format-value.ts";
import type { NightDisplay } from "./night-display.ts";
import { eventWords, tallyWords } from "./night-words.ts";

const BAR = "{bar} {words}";

/** Progress as bars: one for the night, one a worker below it; what happened scrolls by above. */
export function nightBars(io: CliIo): NightDisplay {
  const bars = new MultiBar({
    format: BAR,
    stream: io.stderr,
    barsize: 24,
    barCompleteChar: "█",
    barIncompleteChar: "░",
    hideCursor: true,
    linewrap: false,
    fps: 5,
    emptyOnZero: true,
    // An interrupt is for the night to deal with; the bars go on until it has.
    gracefulExit: false,
  });
  let night: SingleBar | null = null;
  let workers: SingleBar[] = [];
  let ended = false;
  const begin = (picture: LiveNight) => {
    night = bars.create(Math.max(picture.runs, 1), picture.done, { words: "" });
    workers = picture.workers.map(() => bars.create(1, 0, { words: "idle" }));
  };
  return {
    show: (event, picture) => {
      if (ended) return;
      const words = eventWords(event);
      if (words !== null) {
        if (night === null) io.stderr.write(`${words}\n`);
        else bars.log(`${words}\n`);
      }
      if (picture === null) return;
      if (night === null) begin(picture);
      night?.setTotal(Math.max(picture.runs, 1));
      night?.update(picture.done, { words: tallyWords(picture, io.now()) });
      for (const [k, bar] of workers.entries()) moveWorker(bar, picture.workers[k] ?? null);
    },
    end: () => {
      if (ended) return;
      ended = true;
      if (night === null) return;
      // Words that wait for the next drawing would be lost.
      bars.update();
      bars.stop();
    },
  };
}

function moveWorker(bar: SingleBar, worker: WorkerPicture | null): void {
  if (worker === null) {
    bar.setTotal(1);
    bar.update(0, { words: "idle" });
    return;
  }
  const left = worker.secondsLeft === null ? "" : `, at most ${formatDuration(worker.secondsLeft)} left`;
  const attempt = worker.attempt > 1 ? `, attempt ${worker.attempt}` : "";
  bar.setTotal(Math.max(worker.longestSteps, 1));
  bar.update(worker.step, {
    words: `run ${worker.run.number} (${worker.run.label})${attempt}: step ${worker.step} of ${worker.longestSteps}${left}`,
  });
}
