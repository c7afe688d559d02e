import type { AveragingWindow, ChannelJudgement, HistoryJudgement } from "../contract/index.ts";
import { formatInterval, sixDigits } from "./format-value.ts";

/** The judgement of one file for a reader: what was found in every channel, why not, and what would help. */
export function judgementWords(file: string, judged: HistoryJudgement, width: number | null): string {
  const names = Object.keys(judged.channels);
  const nameWidth = Math.max(...names.map((name) => name.length));
  const lines = [
    `${file}: ${judged.samples} samples, time step ${sixDigits(judged.dt)}`,
    ...(judged.onset === null ? [] : [`  onset: ${judged.onset.words}`]),
    ...judged.notes.map((note) => `  note: ${note}`),
    ...Object.entries(judged.channels).flatMap(([name, channel]) =>
      channelLines(name.padEnd(nameWidth), channel),
    ),
  ];
  return [...lines.flatMap((line) => wrapped(line, width)), ""].join("\n");
}

function channelLines(name: string, channel: ChannelJudgement): string[] {
  const indent = " ".repeat(name.length + 4);
  const more = channel.tests.filter((test) => !test.passed && !channel.words.includes(test.words));
  return [
    `  ${name}  ${channel.verdict.padEnd("needs-longer".length)}${valueWords(channel)}`,
    `${indent}${channel.words}`,
    ...(channel.window === null ? [] : [`${indent}window: ${windowWords(channel.window)}`]),
    ...more.map((test) => `${indent}not passed: ${test.words}`),
    ...channel.warnings.map((warning) => `${indent}warning: ${warning}`),
    ...(channel.samplesNeeded === null ? [] : [`${indent}would help: ${neededWords(channel.samplesNeeded)}`]),
  ];
}

/** What is not to be used stands in parentheses. */
function valueWords(channel: ChannelJudgement): string {
  if (channel.mean === null) return "";
  const level = channel.halfWidth === null ? "" : ` at ${sixDigits(100 * channel.confidence)} %`;
  const value = `${formatInterval(channel.mean, channel.halfWidth)}${level}`;
  return channel.verdict === "accepted" ? `   ${value}` : `   (${value})`;
}

/** A line broken between words where the terminal is too narrow for it; what follows keeps the indent. */
function wrapped(line: string, width: number | null): string[] {
  if (width === null || line.length <= width) return [line];
  const indent = " ".repeat(line.length - line.trimStart().length);
  const lines: string[] = [];
  let current = indent;
  for (const word of line.trim().split(" ")) {
    if (current.length + word.length > width && current.trim() !== "") {
      lines.push(current.trimEnd());
      current = `${indent}  `;
    }
    current += `${word} `;
  }
  return [...lines, current.trimEnd()];
}

function windowWords(window: AveragingWindow): string {
  return `samples ${window.fromIndex} to ${window.toIndex - 1}, time ${sixDigits(window.fromTime)} to ${sixDigits(window.toTime)}`;
}

function neededWords([low, high]: readonly [number, number]): string {
  return low === high ? `${low} samples in all` : `${low} to ${high} samples in all`;
}
