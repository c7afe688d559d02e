import { AppError } from "../contract/index.ts";
import type { ResolvedAxis } from "./axis-values.ts";
import { bookCompanions } from "./book-companions.ts";
import { caseProblems, checkCase } from "./check-case.ts";
import { draftBaseline, draftSingles, draftSweep, placeWords } from "./draft-sweep.ts";
import { applyChanges, type Inputs } from "./field-path.ts";
import type { Campaign } from "./parse-campaign.ts";
import { type Problem, problemsError } from "./problem.ts";
import { type BookedRun, labelOf, RunBook, sharedValues } from "./run-book.ts";
import { originOf, type RunDraft } from "./run-draft.ts";

/** The runs of a campaign, in the order of the listing: sweep in file order, baselines, single cases, companions. */
export interface BookedRuns {
  readonly runs: readonly BookedRun[];
  readonly warnings: readonly string[];
}

/** Faulty runs beyond this many are not looked at: the first ones say enough. */
const FAULTY_MAX = 50;

/**
 * Makes the runs of a campaign: drafts them, checks the inputs of each, and books equal ones once.
 *
 * @throws CAMPAIGN_INVALID, CAMPAIGN_EMPTY
 */
export function bookRuns(
  campaign: Campaign,
  axes: readonly ResolvedAxis[],
  modelVersion: string,
): BookedRuns {
  const sweep = draftSweep(campaign, axes);
  const singles = draftSingles(campaign);
  const inputs = checkedInputs(campaign, [...sweep.runs, ...singles]);
  const book = new RunBook({ solver: campaign.file.solver, modelVersion });
  const warnings = [...sweep.warnings];
  for (const draft of sweep.runs) enterOnce(campaign, book, draft, inputs.get(draft)!, warnings);
  bookBaselines(campaign, book, axes);
  for (const [i, draft] of singles.entries())
    enterSingle(campaign, book, draft, i, inputs.get(draft)!, warnings);
  warnings.push(...bookCompanions(campaign, book));
  return { runs: book.runs, warnings };
}

/** Complete inputs of every draft, defaults filled in. */
function checkedInputs(campaign: Campaign, drafts: readonly RunDraft[]): Map<RunDraft, Inputs> {
  const inputs = new Map<RunDraft, Inputs>();
  const problems: Problem[] = [];
  let faulty = 0;
  for (const draft of drafts) {
    const checked = checkDraft(campaign, draft);
    if (checked.kind === "case") inputs.set(draft, checked.inputs);
    else {
      problems.push(...checked.problems);
      if (++faulty === FAULTY_MAX) break;
    }
  }
  if (problems.length > 0) throw problemsError("CAMPAIGN_INVALID", campaign.fileName, problems);
  return inputs;
}

function checkDraft(
  campaign: Campaign,
  draft: RunDraft,
): { kind: "case"; inputs: Inputs } | { kind: "problems"; problems: Problem[] } {
  const given = draft.trail.reduce(
    (base, { changes }) => applyChanges(base, changes),
    campaign.file.case as Inputs,
  );
  const checked = checkCase(given);
  if (checked.kind === "case") return { kind: "case", inputs: checked.inputs };
  const placeOf = (path: readonly PropertyKey[]) =>
    campaign.placeOf(originOf(draft, path as (string | number)[]));
  return { kind: "problems", problems: caseProblems(checked.issues, given, placeOf) };
}

/** Enters a run of the sweep. A variant may come out equal to another run; two points as given that do are a mistake. */
function enterOnce(
  campaign: Campaign,
  book: RunBook,
  draft: RunDraft,
  inputs: Inputs,
  warnings: string[],
): void {
  const { run, isNew } = book.enter(draft, inputs);
  if (isNew) return;
  const first = labelOf(run);
  const second = labelOf({ ...run, draft, varied: draft.varied });
  if (draft.name === null && run.draft.name === null)
    throw new AppError(
      "CAMPAIGN_INVALID",
      `two runs of the sweep come to the same case: ${first}, and ${second}`,
      {
        where: placeWords(campaign, draft.trail.at(-1)?.at ?? ["axes"]),
        fix: "An axis sets a field that makes no difference here, or a pair of values is given twice. Take one of them out.",
      },
    );
  warnings.push(`${second} is the same case as ${first}: one run serves both`);
}

function bookBaselines(campaign: Campaign, book: RunBook, axes: readonly ResolvedAxis[]): void {
  const compared = new Map<BookedRun, BookedRun[]>();
  for (const run of book.runs) {
    const baseline = bookBaseline(campaign, book, run);
    if (baseline === null) continue;
    const others = compared.get(baseline);
    if (others === undefined) compared.set(baseline, [run]);
    else others.push(run);
  }
  for (const [baseline, runs] of compared)
    if (baseline.role === "baseline") baseline.varied = sharedValues(baseline, runs, axes);
}

/** Books the baseline of a run and ties the two; null where there is none, or where the run is its own baseline. */
function bookBaseline(campaign: Campaign, book: RunBook, run: BookedRun): BookedRun | null {
  const draft = draftBaseline(campaign, run.draft);
  if (draft === null) return null;
  const checked = checkDraft(campaign, draft);
  if (checked.kind === "problems")
    throw problemsError("CAMPAIGN_INVALID", campaign.fileName, checked.problems);
  const { run: baseline } = book.enter(draft, checked.inputs);
  if (baseline === run) return null;
  run.baselineRunId = baseline.runId;
  return baseline;
}

function enterSingle(
  campaign: Campaign,
  book: RunBook,
  draft: RunDraft,
  index: number,
  inputs: Inputs,
  warnings: string[],
): void {
  const single = campaign.file.single_cases[index]!;
  const { run, isNew } = book.enter(draft, inputs);
  const ownLength = single.longest_revolutions ?? single.longest_steps ?? single.longest_s;
  if (!isNew) {
    const same = `single case "${single.name}" is the same case as ${labelOf(run)}`;
    if (ownLength !== undefined)
      throw new AppError("CAMPAIGN_INVALID", `${same}: one case cannot have two longest runs`, {
        where: placeWords(campaign, ["single_cases", index]),
        fix: "Change one of its inputs, or take out its longest run.",
      });
    warnings.push(`${same}: it is run once`);
  }
  if (single.with_baseline) bookBaseline(campaign, book, run);
}
