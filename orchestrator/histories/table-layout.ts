import { CsvError, parse } from "csv-parse/sync";
import { AppError } from "../contract/index.ts";
import { numberCell } from "./number-cell.ts";

/** How a table is written: what parts its columns, what they are called, and where its numbers begin. */
export interface TableLayout {
  readonly names: readonly string[];
  readonly split: (line: string) => string[];
  /** Whether a comma parts the columns, so that it can't be a decimal comma. */
  readonly commaParts: boolean;
  /** 0-based index of the first line of numbers. */
  readonly firstRow: number;
}

const MARKS = [";", "\t", "|", ","] as const;

/**
 * Reads the layout off the first lines of a file: the header, which may follow comment lines or be the last of them
 * (`# t CN CL`), and the mark that parts both the header and the first row of numbers.
 *
 * @throws HISTORY_INVALID where there is no header, no row, one column, a nameless column or a name given twice
 */
export function tableLayout(lines: readonly string[], shown: string): TableLayout {
  const content = lines.flatMap((line, index) => (isBlank(line) || isComment(line) ? [] : [index]));
  const first = content[0];
  if (first === undefined) throw invalid(shown, 1, "the file is empty", HEADER_FIX);
  const split = splitter([lines[first]!, lines[content[1] ?? first]!]);
  if (split.cells(lines[first]!).every((cell) => numberCell(cell) !== undefined))
    return withNames(commentHeader(lines, first, split, shown), split, first, shown, first);
  const second = content[1];
  if (second === undefined)
    throw invalid(
      shown,
      first + 1,
      "the file has a header but no rows",
      "Check that the solver wrote its history.",
    );
  return withNames(split.cells(lines[first]!), split, second, shown, first);
}

const HEADER_FIX = "The first line has to name the columns, time first: t,CN,CL for example.";

interface Split {
  readonly mark: string;
  readonly cells: (line: string) => string[];
}

/** The first mark that parts every one of the lines; else blanks. */
function splitter(lines: readonly string[]): Split {
  for (const mark of MARKS) {
    const cells = (line: string) => (line.includes('"') ? quotedCells(line, mark) : line.split(mark));
    if (lines.every((line) => cells(line).length > 1)) return { mark, cells };
  }
  return { mark: " ", cells: blankCells };
}

function blankCells(line: string): string[] {
  const text = line.trim();
  if (!text.includes('"')) return text.split(/\s+/);
  return quotedCells(text.replace(/\s+/g, " "), " ");
}

/** The cells of a line with quotation marks in it; where these don't pair up, the line is one cell. */
function quotedCells(line: string, delimiter: string): string[] {
  try {
    const rows: string[][] = parse(line, { delimiter, relax_column_count: true, trim: true });
    return rows[0] ?? [""];
  } catch (error) {
    if (error instanceof CsvError) return [line];
    throw error;
  }
}

function commentHeader(lines: readonly string[], firstRow: number, split: Split, shown: string): string[] {
  const columns = split.cells(lines[firstRow]!).length;
  const comment = lines.slice(0, firstRow).findLast((line) => isComment(line)) ?? "";
  const names = [split.cells, blankCells].map((cells) => cells(comment.trim().replace(/^[#%]+\s*/, "")));
  const header = names.find((candidate) => candidate.length === columns);
  if (header !== undefined && comment !== "") return header;
  throw invalid(shown, firstRow + 1, "the header is missing: this line already holds numbers", HEADER_FIX);
}

function withNames(
  raw: readonly string[],
  split: Split,
  firstRow: number,
  shown: string,
  headerLine: number,
): TableLayout {
  const names = raw.map((name) => name.trim());
  // Some solvers end every line with the mark that parts the columns; the last name is then empty, and so is its column.
  if (names.length > 1 && names.at(-1) === "") names.pop();
  const place = headerLine + 1;
  if (names.length < 2)
    throw invalid(
      shown,
      place,
      `the file has one column only (${JSON.stringify(names[0])}), and needs time and at least one channel`,
      "Columns may be parted by comma, semicolon, tab, bar or blanks.",
    );
  const nameless = names.indexOf("");
  if (nameless >= 0) throw invalid(shown, place, `column ${nameless + 1} has no name`, HEADER_FIX);
  const twice = names.findIndex((name, index) => names.indexOf(name) !== index);
  if (twice >= 0)
    throw invalid(
      shown,
      place,
      `columns ${names.indexOf(names[twice]!) + 1} and ${twice + 1} are both called ${JSON.stringify(names[twice])}`,
      "Give every column a name of its own.",
    );
  return { names, split: split.cells, commaParts: split.mark === ",", firstRow };
}

function isBlank(line: string): boolean {
  return line.trim() === "";
}

function isComment(line: string): boolean {
  return /^\s*[#%]/.test(line);
}

function invalid(shown: string, line: number, what: string, fix: string): AppError {
  return new AppError("HISTORY_INVALID", `cannot use ${shown}: ${what}`, { where: `${shown}:${line}`, fix });
}
