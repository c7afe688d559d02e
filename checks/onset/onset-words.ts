import type { OnsetKind } from "../../orchestrator/contract/index.ts";

const SEEN: Readonly<Record<OnsetKind, string>> = {
  "blow-up": "runs away in one direction",
  "growing-oscillation": "oscillates with growing amplitude",
  "wake-breakdown": "fluctuates much more than before, within bounds",
  "mean-shift": "changes its mean at once and keeps the new one",
  "spike-cluster": "shows one spike after the other",
  "non-finite": "is not a finite number",
  "no-stable-baseline": "is in trouble",
};

/** What an onset's sentence is made of. */
export interface OnsetFacts {
  readonly kind: OnsetKind;
  readonly channel: string;
  readonly index: number;
  readonly time: number;
  readonly band: readonly [number, number];
  readonly growthPerStep: number | null;
  readonly trustedEndIndex: number | null;
  readonly agreeing: number;
}

/** Says what was seen, when, how fast, and where the trusted stretch ends. */
export function onsetWords(facts: OnsetFacts): string {
  const { channel, kind, index, band, growthPerStep, trustedEndIndex, agreeing } = facts;
  const surely = band[0] === band[1] ? "" : `, surely between ${band[0]} and ${band[1]}`;
  const parts = [`${channel} ${SEEN[kind]} from sample ${index} on (t = ${short(facts.time)})${surely}.`];
  if (growthPerStep !== null && growthPerStep > 0) {
    parts.push(`It grows e-fold in ${short(1 / growthPerStep)} steps.`);
  }
  if (agreeing > 1) parts.push(`${agreeing} channels show it.`);
  parts.push(
    trustedEndIndex === null
      ? "Each side may be averaged by itself; an average across the change means little."
      : `Samples before ${trustedEndIndex} may still be averaged.`,
  );
  return parts.join(" ");
}

/** Says that trouble came before there was anything to hold it against. */
export function noBaselineWords(channel: string, alarmIndex: number, nonFinite: boolean): string {
  const seen = nonFinite ? "is not a finite number" : "is in trouble";
  return (
    `${channel} ${seen} at sample ${alarmIndex}, and there was no stable stretch before to tell since when. ` +
    "No onset is named and nothing of this run may be averaged: change the settings and run it again."
  );
}

function short(value: number): string {
  return String(Number(value.toPrecision(4)));
}
