// One command a file: each parses its options, calls what does the work, and prints the answer. Nothing here computes.
// A new command is one file in this folder and one line below. Read check.ts first: it needs nothing but files.
import type { Command } from "commander";
import type { CommandIo } from "../cli-io.ts";
import { checkCommand } from "./check.ts";
import { historyCommand } from "./history.ts";
import { launchCommand } from "./launch.ts";
import { loadsCommand } from "./loads.ts";
import { planCommand } from "./plan.ts";
import { removeCommand } from "./remove.ts";
import { schemaCommand } from "./schema.ts";
import { stopCommand } from "./stop.ts";
import { tellCommand } from "./tell.ts";

/** Every command, in the order of the help. */
export const commands: readonly ((io: CommandIo) => Command)[] = [
  planCommand,
  launchCommand,
  tellCommand,
  loadsCommand,
  historyCommand,
  checkCommand,
  stopCommand,
  removeCommand,
  schemaCommand,
];
