import type { AcceptRule, LegReport, Remedy } from "../contract/index.ts";
import { applyChanges } from "../planning/field-path.ts";
import { canonicalJson } from "../planning/run-id.ts";
import type { AppliedRemedy } from "../store/rows.ts";
import type { NextStep } from "../store/store.ts";
import { runVerdict } from "./run-verdict.ts";

/** What the next step of a run depends on, besides the leg. */
export interface RunSituation {
  readonly accept: AcceptRule;
  /** Remedies of the campaign, in the order in which they are tried. */
  readonly remedies: readonly Remedy[];
  /** Remedy of the attempt that the leg belongs to. */
  readonly remedy: AppliedRemedy | null;
  /** The case as planned, before any remedy. */
  readonly inputs: Readonly<Record<string, unknown>>;
  readonly shortestSteps: number;
}

/** What happens to a run after a leg that was reported. Troubles of the disk are no outcome of a run and never come here. */
export function nextAfterLeg(
  report: Pick<LegReport, "outcome" | "message" | "accepted" | "judgement" | "stopStep">,
  situation: RunSituation,
): NextStep {
  switch (report.outcome) {
    case "budget":
    case "interrupted":
      return { kind: "continue" };
    case "accepted":
      return done("accepted", "every demanded channel is accepted", "accepted");
    case "onset":
      return report.accepted
        ? done("accepted", `${onsetWords(report)}; what precedes it is long enough to be averaged`, "onset")
        : afterOnset(report, situation);
    case "longest":
      return atTheLongest(report, situation);
    default:
      return done("failed", report.message ?? "the solver failed", "failed");
  }
}

type Ended = Parameters<typeof nextAfterLeg>[0];

function done(
  verdict: Extract<NextStep, { kind: "done" }>["verdict"],
  reason: string,
  stopCause: Extract<NextStep, { kind: "done" }>["stopCause"],
): NextStep {
  return { kind: "done", verdict, reason, stopCause };
}

function onsetWords(report: Ended): string {
  return report.judgement?.onset?.words ?? report.message ?? "the run became unstable";
}

function afterOnset(report: Ended, situation: RunSituation): NextStep {
  const next = nextRemedy(situation.remedies, situation.remedy);
  const reason = onsetWords(report);
  if (next !== null) {
    const remedy = { name: next.name, cost: next.cost, set: next.set };
    const inputs = applyChanges(situation.inputs, next.set);
    const settings = canonicalJson(next.set);
    return { kind: "next-attempt", verdict: "unstable", reason, remedy, settings, inputs };
  }
  const tried =
    situation.remedies.length === 0 ? "" : `; no remedy is left (${situation.remedies.length} tried)`;
  return done("unstable", `${reason}${tried}`, "onset");
}

/** The remedy after the one applied; one that changes what an earlier one changed to the same is the same attempt, and passed over. */
function nextRemedy(remedies: readonly Remedy[], applied: AppliedRemedy | null): Remedy | null {
  const at = applied === null ? -1 : remedies.findIndex((remedy) => remedy.name === applied.name);
  const seen = new Set(["{}", ...remedies.slice(0, at + 1).map((remedy) => canonicalJson(remedy.set))]);
  return remedies.slice(at + 1).find((remedy) => !seen.has(canonicalJson(remedy.set))) ?? null;
}

function atTheLongest(report: Ended, situation: RunSituation): NextStep {
  const { verdict, words } = runVerdict(report.judgement, situation.accept);
  if (verdict === "accepted")
    return done(
      "needs-longer",
      `the averages are settled, but nothing is accepted before step ${situation.shortestSteps}; the longest run ends at ${report.stopStep}`,
      "longest",
    );
  return done(verdict, `longest run reached; ${words}`, "longest");
}
