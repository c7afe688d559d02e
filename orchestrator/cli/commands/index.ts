import type { Command } from "commander";
import type { CommandIo } from "../cli-io.ts";

/** Every command, in the order of the help. A new command is one file in this folder and one line here. */
export const commands: readonly ((io: CommandIo) => Command)[] = [];
