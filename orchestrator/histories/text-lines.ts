import { AppError } from "../contract/index.ts";

/** Longest line that is taken for one row of a table, in characters. */
const LINE_MAX = 1 << 20;

/** Cuts chunks of text into batches of whole lines, without their line ends; the last line needs none. */
export async function* textLines(chunks: AsyncIterable<string>, shown: string): AsyncGenerator<string[]> {
  let rest = "";
  for await (const chunk of chunks) {
    const lines = (rest + chunk).split("\n");
    rest = lines.pop() ?? "";
    if (rest.length > LINE_MAX)
      throw new AppError("HISTORY_INVALID", `${shown} has a line of more than ${LINE_MAX} characters`, {
        where: shown,
        fix: "A history is a table with one line a time step. Check that lines end in a line feed.",
      });
    yield lines;
  }
  if (rest !== "") yield [rest];
}
