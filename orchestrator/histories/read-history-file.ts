// Histories that other programs wrote: tables of numbers with a header, one line a time step. Nothing here judges them,
// and midwatch's own histories are not read here. Read this file first, then table-layout.ts and table-rows.ts.
import { AppError } from "../contract/index.ts";
import { nameList, nearestName } from "../planning/nearest-name.ts";
import { hasDecimalComma } from "./number-cell.ts";
import { openText } from "./open-text.ts";
import { type TableLayout, tableLayout } from "./table-layout.ts";
import { TableRows } from "./table-rows.ts";
import { textLines } from "./text-lines.ts";

/** A history from a file: time and channels in the order of the file, one value a sample. */
export interface ForeignHistory {
  readonly timeName: string;
  readonly time: Float64Array;
  readonly channels: readonly { readonly name: string; readonly values: Float64Array }[];
  /** How the file was read, where that is not obvious. */
  readonly notes: readonly string[];
}

/** Which columns to read. */
export interface ColumnChoice {
  /** The column of time; the first one where none is named. */
  readonly time?: string | undefined;
  /** Channels to read; all where none is named. */
  readonly channels?: readonly string[] | undefined;
}

/**
 * Reads one file. `path` is opened, `shown` is the name that messages use.
 *
 * @throws FILE_NOT_FOUND, FILE_UNREADABLE, HISTORY_INVALID, TOO_LARGE, with line and column
 */
export async function readHistoryFile(
  path: string,
  shown: string,
  choice: ColumnChoice = {},
): Promise<ForeignHistory> {
  const batches = textLines(openText(path, shown), shown);
  try {
    return await readTable(batches, shown, choice);
  } finally {
    await batches.return(undefined);
  }
}

async function readTable(
  batches: AsyncGenerator<string[]>,
  shown: string,
  choice: ColumnChoice,
): Promise<ForeignHistory> {
  const head = await firstLines(batches);
  const layout = tableLayout(head, shown);
  const kept = keptColumns(layout.names, choice, shown);
  const decimalComma = !layout.commaParts && usesDecimalComma(head.slice(layout.firstRow), layout);
  const rows = new TableRows(layout, { shown, kept, decimalComma });
  let lineNumber = layout.firstRow;
  const take = (line: string) => {
    lineNumber += 1;
    rows.push(line, lineNumber);
  };
  for (const line of head.slice(layout.firstRow)) take(line);
  for await (const lines of batches) for (const line of lines) take(line);
  return finished(rows, layout, { kept, decimalComma, shown });
}

/** The column of words that midwatch's own exports carry. */
const CAUTION_COLUMN = "caution";

/** Lines up to the end of the batch in which the second line with content comes: enough to know the layout by. */
async function firstLines(batches: AsyncGenerator<string[]>): Promise<string[]> {
  const head: string[] = [];
  for (let content = 0; content < 2; ) {
    const next = await batches.next();
    if (next.done === true) break;
    head.push(...next.value);
    content += next.value.filter((line) => line.trim() !== "" && !/^\s*[#%]/.test(line)).length;
  }
  return head;
}

function usesDecimalComma(rows: readonly string[], layout: TableLayout): boolean {
  return rows.slice(0, 1000).some((line) => layout.split(line).some(hasDecimalComma));
}

function keptColumns(names: readonly string[], choice: ColumnChoice, shown: string): number[] {
  const find = (name: string): number => {
    const index = names.indexOf(name);
    if (index >= 0) return index;
    const near = nearestName(name, names);
    const hint = near === null ? "" : `Did you mean ${JSON.stringify(near)}? `;
    throw new AppError("HISTORY_INVALID", `${shown} has no column ${JSON.stringify(name)}`, {
      where: shown,
      fix: `${hint}It has ${nameList(names, 30)}.`,
    });
  };
  const time = choice.time === undefined ? 0 : find(choice.time);
  const wanted =
    choice.channels?.map(find) ?? names.flatMap((name, index) => (name === CAUTION_COLUMN ? [] : [index]));
  const channels = new Set(wanted.filter((index) => index !== time));
  if (channels.size > 0) return [time, ...channels];
  throw new AppError("HISTORY_INVALID", `${shown}: ${JSON.stringify(names[time])} is the time, no channel`, {
    where: shown,
    fix: `Name another column with --channel. It has ${names.join(", ")}.`,
  });
}

function finished(
  rows: TableRows,
  layout: TableLayout,
  { kept, decimalComma, shown }: { kept: readonly number[]; decimalComma: boolean; shown: string },
): ForeignHistory {
  const [time, ...channels] = rows.columns.map((column) => column.toArray());
  if (time === undefined || time.length < 2)
    throw new AppError("HISTORY_INVALID", `cannot use ${shown}: it has ${time?.length ?? 0} rows`, {
      where: shown,
      fix: "A history needs two rows at least, or it has no time step.",
    });
  return {
    timeName: layout.names[kept[0]!]!,
    time,
    channels: channels.map((values, k) => ({ name: layout.names[kept[k + 1]!]!, values })),
    notes: decimalComma ? ["commas in numbers were read as decimal marks"] : [],
  };
}
