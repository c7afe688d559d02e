import type { Case } from "../contract/case-schema.ts";
import { caseProblems, checkCase } from "./check-case.ts";
import { type Aspect, companionChanges, USUAL_FACTORS } from "./companion-changes.ts";
import { cornersAndMiddle, middleOf } from "./corners-and-middle.ts";
import { applyChanges } from "./field-path.ts";
import type { Campaign } from "./parse-campaign.ts";
import { problemsError } from "./problem.ts";
import { type BookedRun, labelOf, type RunBook } from "./run-book.ts";

/** An aspect that is tested, and the factor of its companions. */
interface TestedAspect {
  readonly aspect: Aspect;
  readonly key: "wake_length" | "step" | "strips";
  readonly factor: number;
}

const WORDS: Readonly<Record<Aspect, string>> = {
  "wake-length": "wake length",
  step: "time step",
  strips: "strips",
};

/** Books the companions of a campaign and returns what was noticed. */
export function bookCompanions(campaign: Campaign, book: RunBook): string[] {
  const tested = testedRuns(campaign, book.runs);
  return testedAspects(campaign).flatMap((asked) =>
    tested.flatMap((run) => bookCompanion(campaign, book, run, asked)),
  );
}

function testedAspects({ file: { sufficiency } }: Campaign): TestedAspect[] {
  if (sufficiency === "off" || sufficiency === false) return [];
  const aspects = [
    { aspect: "wake-length", key: "wake_length" },
    { aspect: "step", key: "step" },
    { aspect: "strips", key: "strips" },
  ] as const;
  return aspects.flatMap(({ aspect, key }) => {
    const setting = sufficiency[key];
    if (setting === "off" || setting === false) return [];
    return [{ aspect, key, factor: typeof setting === "number" ? setting : USUAL_FACTORS[aspect] }];
  });
}

/** Runs of the sweep that get companions; variants are tested where the run as given is. */
function testedRuns({ file: { sufficiency } }: Campaign, runs: readonly BookedRun[]): BookedRun[] {
  const sweep = runs.filter((run) => run.role === "sweep" && run.draft.name === null);
  if (sufficiency === "off" || sufficiency === false || sweep.length === 0) return [];
  if (sufficiency.at === "every run") return sweep;
  const points = sweep.map((run) => run.draft.position ?? []);
  const chosen = sufficiency.at === "middle" ? [middleOf(points)] : cornersAndMiddle(points);
  return chosen.map((index) => sweep[index]!);
}

function bookCompanion(campaign: Campaign, book: RunBook, run: BookedRun, asked: TestedAspect): string[] {
  const { aspect, factor, key } = asked;
  const changes = companionChanges(run.inputs as Case, aspect, factor);
  const given = applyChanges(run.inputs, changes);
  const checked = checkCase(given);
  if (checked.kind === "problems") {
    const problems = caseProblems(checked.issues, given, () => campaign.placeOf(["sufficiency", key]));
    throw problemsError(
      "CAMPAIGN_INVALID",
      campaign.fileName,
      problems.map((p) => ({
        ...p,
        words: `${p.words} (the ${WORDS[aspect]} companion of ${labelOf(run)})`,
      })),
      `Give sufficiency.${key} another factor than ${factor}, or say off.`,
    );
  }
  const name = `${WORDS[aspect]} × ${factor}`;
  const draft = { ...run.draft, role: "companion" as const, name, position: null };
  const { run: companion, isNew } = book.enter(draft, checked.inputs);
  if (companion === run)
    return [`a factor of ${factor} leaves the ${WORDS[aspect]} of ${labelOf(run)} as it is: no companion`];
  if (companion.companionOf === null) companion.companionOf = { runId: run.runId, aspect };
  if (isNew && aspect === "step") companion.stepScale = 1 / factor;
  return [];
}
