import { createOnsetMonitor } from "../../../checks/onset/index.ts";
import { Draw } from "./draw.ts";

/** Cost of the streaming monitors, microseconds a sample and channel: best of five passes of 200 000 steps. */
export function measureSpeed(seed: number): Record<string, number> {
  const noise = new Draw(seed).noise(200_000, 0.8);
  const cases: Record<string, readonly number[]> = {
    "no period": [],
    "one period": [20],
    "two periods": [36, 10],
  };
  return Object.fromEntries(Object.entries(cases).map(([name, periods]) => [name, best(noise, periods)]));
}

function best(noise: Float64Array, periodsSteps: readonly number[]): number {
  let least = Number.POSITIVE_INFINITY;
  for (let pass = 0; pass < 5; pass++) {
    const channels = ["a", "b", "c", "d"];
    const monitor = createOnsetMonitor({ channels, periodsSteps, plannedSteps: noise.length });
    const sample = new Float64Array(channels.length);
    const start = process.cpuUsage();
    for (let t = 0; t < noise.length; t++) {
      for (let i = 0; i < sample.length; i++)
        sample[i] = 1 + 0.01 * (i + 1) * noise[(t + i * 977) % noise.length]!;
      monitor.push(sample);
    }
    const used = process.cpuUsage(start);
    least = Math.min(least, (used.user + used.system) / (noise.length * channels.length));
  }
  return least;
}
