import { Command } from "commander";
import type { CampaignState } from "../../store/rows.ts";
import type { CommandIo } from "../cli-io.ts";
import { type DataOptions, withAnswers, withData } from "../data-folder.ts";
import { withExamples } from "../examples.ts";
import { campaignsWords, campaignWords } from "../tell-words.ts";
import { terminalWidth, writeJson, writeOut } from "../write-out.ts";

interface TellOptions extends DataOptions {
  readonly json?: boolean;
}

/** `midwatch tell`: how the night, a campaign and its runs stand now. */
export function tellCommand(io: CommandIo): Command {
  const command = withData(new Command("tell"))
    .description(
      "Tell how things stand now: all campaigns of the data folder, or one campaign with its runs.",
    )
    .argument("[campaign]", "campaign to tell about; all where none is named")
    .option("--json", "print one JSON document")
    .action((campaign: string | undefined, options: TellOptions) =>
      campaign === undefined ? tellAll(options, io) : tellOne(campaign, options, io),
    );
  return withExamples(command, [
    ["midwatch tell", "every campaign, and the night that is going on"],
    ["midwatch tell lantern --json", "every run of one campaign, for a script"],
  ]);
}

async function tellAll(options: TellOptions, io: CommandIo): Promise<void> {
  await withAnswers(options, io, async (answers) => {
    const campaigns = await answers.campaigns();
    const night = await answers.liveNight();
    if (options.json === true) return writeJson(io.stdout, { campaigns, night });
    await writeOut(io.stdout, `${campaignsWords(campaigns, night, style(io))}\n`);
  });
}

async function tellOne(campaign: string, options: TellOptions, io: CommandIo): Promise<void> {
  await withAnswers(options, io, async (answers) => {
    const state = await answers.campaignState(campaign);
    const night = await answers.liveNight();
    if (options.json === true)
      return writeJson(io.stdout, {
        ...shortState(state),
        night: night?.campaign === campaign ? night : null,
      });
    await writeOut(io.stdout, `${campaignWords(state, night, style(io))}\n`);
  });
}

/** A campaign without its plan and without averages: these are for `loads`, which marks what may be used. */
function shortState(state: CampaignState): object {
  const { plan: _plan, list, ...summary } = state;
  return {
    ...summary,
    list: list.map(({ planned: _planned, judgement: _judgement, channels: _channels, ...run }) => run),
  };
}

function style(io: CommandIo): { width: number | null; now: Date } {
  return { width: terminalWidth(io.stdout), now: io.now() };
}
