/**
 * What the watching thread of a child runs: it ends the process when its manager (`parent`) is gone or it uses more than
 * `memoryBytes`, looking every `everyMs`. It is a thread since the main one may be busy with a step for minutes, and plain text
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
