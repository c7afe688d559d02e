import type { FamilyOutcome } from "./measure.ts";

/** Everything that one pass of the bench found. */
export interface OnsetResults {
  readonly seed: number;
  readonly trouble: readonly FamilyOutcome[];
  /** The same troubled histories, judged from what is known at the alarm. */
  readonly live: readonly FamilyOutcome[];
  readonly lookAlikes: readonly FamilyOutcome[];
  readonly tooEarly: readonly FamilyOutcome[];
  readonly stable: readonly FamilyOutcome[];
  readonly microsecondsPerSample: Readonly<Record<string, number>>;
}

const HEAD = `# How well onset is found

Seeded Monte-Carlo over histories of our own invention, by \`tests/bench/onset-characteristics.ts\`. No seed here was used to
choose anything. Steps of the mean are 5 to 12 standard deviations, breakdowns a factor of 2.5 to 6.`;

/** The results as Markdown. */
export function onsetTables(results: OnsetResults): string {
  const quiet = [...results.lookAlikes, ...results.stable, ...results.tooEarly];
  const speed = Object.entries(results.microsecondsPerSample).map(([name, us]) => [name, us.toFixed(2)]);
  return [
    HEAD,
    "### Trouble, judged from the whole history",
    table(TROUBLE_HEAD, results.trouble.map(troubleRow)),
    "### Trouble, judged when the alarm comes",
    table(TROUBLE_HEAD, results.live.map(troubleRow)),
    "### Sound, and troubled without a baseline",
    table(
      ["family", "runs", "onset named", "anything said", "kinds"],
      quiet.map((f) => [
        f.family,
        String(f.runs),
        share(f.named, f.runs),
        share(f.flagged, f.runs),
        kindWords(f.kinds),
      ]),
    ),
    "### Cost of the running monitors",
    table(["", "µs a sample and channel"], speed),
    `Seed ${results.seed}; standard errors in brackets; medians of delay and error in steps.\n`,
  ].join("\n\n");
}

const TROUBLE_HEAD = [
  "family",
  "runs",
  "found",
  "before the onset",
  "right class",
  "delay",
  "error",
  "error, e-folds",
  "in band",
  "trusted ends before",
  "rate found/true",
] as const;

function troubleRow(f: FamilyOutcome): string[] {
  const hits = Math.round(f.named * f.runs);
  return [
    f.family,
    String(f.runs),
    share(f.named, f.runs),
    share(f.early, f.runs),
    share(f.rightClass, hits),
    number(f.delayMedian, 0),
    number(f.errorSteps, 1),
    number(f.errorEfolds, 2),
    share(f.bandCoverage, hits),
    share(f.trustedBefore, hits),
    number(f.rateRatio, 2),
  ];
}

function share(p: number, n: number): string {
  if (!Number.isFinite(p)) return "–";
  return `${(100 * p).toFixed(1)} % (${(100 * Math.sqrt((p * (1 - p)) / Math.max(1, n))).toFixed(1)})`;
}

function number(value: number, digits: number): string {
  return Number.isFinite(value) ? value.toFixed(digits) : "–";
}

function kindWords(kinds: Readonly<Record<string, number>>): string {
  return Object.entries(kinds)
    .map(([kind, count]) => `${kind} ${count}`)
    .join(", ");
}

function table(head: readonly string[], rows: readonly (readonly string[])[]): string {
  const line = (cells: readonly string[]) => `| ${cells.join(" | ")} |`;
  return [line(head), line(head.map(() => "---")), ...rows.map(line)].join("\n");
}
