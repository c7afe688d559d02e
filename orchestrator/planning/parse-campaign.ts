import { type CampaignFile, campaignSchema } from "../contract/campaign-schema.ts";
import { baseCaseProblems } from "./check-case.ts";
import { explainIssues } from "./explain-issue.ts";
import { FieldCatalogue } from "./field-catalogue.ts";
import { parseYaml } from "./parse-yaml.ts";
import { type Problem, problemsError, type TextPlace } from "./problem.ts";

/** A campaign file that was read and is well formed; whether its runs make sense is found when it is expanded. */
export interface Campaign {
  readonly fileName: string;
  /** The text as it was given. */
  readonly source: string;
  readonly file: CampaignFile;
  /** Place in the text of a field, or of its nearest parent that stands there. */
  readonly placeOf: (path: readonly PropertyKey[]) => TextPlace;
}

const catalogue = new FieldCatalogue(campaignSchema);

/**
 * Reads the text of a campaign.
 *
 * @param fileName what messages call the file
 * @throws YAML_SYNTAX, TOO_LARGE, CAMPAIGN_EMPTY, CAMPAIGN_INVALID with every problem and its place
 */
export function parseCampaign(text: string, fileName: string): Campaign {
  const source = text.replace(/^\uFEFF/, "");
  const { value, placeOf } = parseYaml(source, fileName);
  if (value === null || value === undefined)
    throw problemsError(
      "CAMPAIGN_EMPTY",
      fileName,
      [{ place: { line: 1, column: 1 }, field: "", words: "the file holds nothing" }],
      "Begin with a copy of examples/first-campaign.yaml.",
    );
  const result = campaignSchema.safeParse(value);
  const shape: Problem[] = result.success
    ? []
    : explainIssues(result.error.issues, { catalogue, value, placeOf });
  const problems = [...shape, ...baseCaseProblems(value, placeOf)];
  if (!result.success || problems.length > 0) throw problemsError("CAMPAIGN_INVALID", fileName, problems);
  return { fileName, source, file: result.data, placeOf };
}
