/** Bounds that the thread keeps an eye on, and how often. */
export interface WatchOptions {
  readonly memoryBytes: number;
  readonly everyMs: number;
}

/**
 * What the watching thread runs. It is a thread since the main one may be busy with a step for minutes, and plain text
 * since a thread does not inherit the loader that runs TypeScript in tests.
 */
export const WATCH_THREAD = `
const { workerData } = require("node:worker_threads");
const { writeSync } = require("node:fs");
const { parent, memoryBytes, everyMs } = workerData;
setInterval(() => {
  if (process.ppid !== parent) process.kill(process.pid, "SIGKILL");
  const used = process.memoryUsage.rss();
  if (used > memoryBytes) {
    const mega = (bytes) => Math.round(bytes / 1048576);
    writeSync(2, "out of memory: " + mega(used) + " MB in use, " + mega(memoryBytes) + " MB allowed\\n");
    process.kill(process.pid, "SIGABRT");
  }
}, everyMs);
`;
