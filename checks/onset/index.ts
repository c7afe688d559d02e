// Onset of instability: monitors that watch a run while it goes, and the locator that says afterwards where it began.
// Pure functions of the samples; nothing here reads files, clocks or random numbers. Averages are judged elsewhere.
// Start with onset-monitor.ts (the streaming side) and locate-after-alarm.ts (the locating side).
export type { ChannelBound, OnsetAlarm } from "./alarm.ts";
export { locateAfterAlarm } from "./locate-after-alarm.ts";
export { locateOnset } from "./locate-onset.ts";
export { createOnsetMonitor, type OnsetMonitor, type OnsetMonitorOptions } from "./onset-monitor.ts";
