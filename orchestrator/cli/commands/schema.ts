import { Command } from "commander";
import { campaignJsonSchema } from "../../planning/index.ts";
import type { CommandIo } from "../cli-io.ts";
import { withExamples } from "../examples.ts";
import { writeJson } from "../write-out.ts";

/** `midwatch schema`: the JSON Schema of campaign files, for editors that complete and check. */
export function schemaCommand(io: CommandIo): Command {
  const command = new Command("schema")
    .description(
      "Print the JSON Schema of campaign files: every field with its unit, range and meaning. Editors complete and check by it.",
    )
    .option("--json", "the same: the answer is JSON in any case")
    .action(() => writeJson(io.stdout, campaignJsonSchema()));
  return withExamples(command, [
    [
      "midwatch schema > campaign.schema.json",
      "keep it beside your campaigns and name it in your editor's settings for YAML or JSON",
    ],
  ]);
}
