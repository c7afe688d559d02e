import type { AveragingWindow, ChannelJudgement, HistoryJudgement } from "../contract/index.ts";
import { formatInterval, sixDigits } from "./format-value.ts";

/** The judgement of one file for a reader: what was found in every channel, why not, and what would help. */
export function judgementWords(file: string, judged: HistoryJudgement): string {
  const names = Object.keys(judged.channels);
  const width = Math.max(...names.map((name) => name.length));
  return [
    `${file}: ${judged.samples} samples, time step ${sixDigits(judged.dt)}`,
    ...(judged.onset === null ? [] : [`  onset: ${judged.onset.words}`]),
    ...judged.notes.map((note) => `  note: ${note}`),
    ...Object.entries(judged.channels).flatMap(([name, channel]) =>
      channelLines(name.padEnd(width), channel),
    ),
    "",
  ].join("\n");
}

function channelLines(name: string, channel: ChannelJudgement): string[] {
  const indent = " ".repeat(name.length + 4);
  const value = channel.mean === null ? "" : `   ${formatInterval(channel.mean, channel.halfWidth)}`;
  const level = channel.halfWidth === null ? "" : ` (${sixDigits(100 * channel.confidence)} %)`;
  return [
    `  ${name}  ${channel.verdict.padEnd("needs-longer".length)}${value}${level}`,
    `${indent}${channel.words}`,
    ...(channel.window === null ? [] : [`${indent}window: ${windowWords(channel.window)}`]),
    ...channel.tests.filter((test) => !test.passed).map((test) => `${indent}not passed: ${test.words}`),
    ...channel.warnings.map((warning) => `${indent}warning: ${warning}`),
    ...(channel.samplesNeeded === null ? [] : [`${indent}would help: ${neededWords(channel.samplesNeeded)}`]),
  ];
}

function windowWords(window: AveragingWindow): string {
  return `samples ${window.fromIndex} to ${window.toIndex - 1}, time ${sixDigits(window.fromTime)} to ${sixDigits(window.toTime)}`;
}

function neededWords([low, high]: readonly [number, number]): string {
  return low === high ? `${low} samples in all` : `${low} to ${high} samples in all`;
}
