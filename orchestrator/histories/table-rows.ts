import { AppError } from "../contract/index.ts";
import { GrowableColumn } from "./growable-column.ts";
import { hasDecimalComma, numberCell } from "./number-cell.ts";
import type { TableLayout } from "./table-layout.ts";

/** Most numbers kept of one file: a gigabyte and a half of memory. */
const VALUES_MAX = 200_000_000;

/** Collects the rows of a table, checking each: as many cells as names, numbers in them, rising time. */
export class TableRows {
  readonly columns: readonly GrowableColumn[];
  private readonly layout: TableLayout;
  private readonly shown: string;
  /** Places in a row of the columns to keep; time comes first. */
  private readonly kept: readonly number[];
  private readonly decimalComma: boolean;
  private lastTime = -Infinity;

  constructor(
    layout: TableLayout,
    options: { shown: string; kept: readonly number[]; decimalComma: boolean },
  ) {
    this.layout = layout;
    this.shown = options.shown;
    this.kept = options.kept;
    this.decimalComma = options.decimalComma;
    this.columns = options.kept.map(() => new GrowableColumn());
  }

  /** Takes in one line; blank ones and comments between the rows are passed over. */
  push(line: string, lineNumber: number): void {
    const cells = this.layout.split(line);
    if (cells.length !== this.layout.names.length && !this.isForgivable(cells, line, lineNumber)) return;
    for (let k = 0; k < this.kept.length; k++) {
      const column = this.kept[k]!;
      const value = this.number(cells[column]!);
      if (value === undefined) throw this.badCell(cells[column]!, lineNumber, column);
      if (k === 0) this.checkTime(value, lineNumber);
      this.columns[k]!.push(value);
    }
    if (this.columns[0]!.length * this.kept.length > VALUES_MAX) throw this.tooLarge(lineNumber);
  }

  private number(cell: string): number | undefined {
    if (!this.decimalComma) return numberCell(cell);
    return cell.includes(".") ? undefined : numberCell(cell.replace(",", "."));
  }

  /** False: the line is no row. True: it is one, with nothing but the mark at its end too much. Else it throws. */
  private isForgivable(cells: readonly string[], line: string, lineNumber: number): boolean {
    const text = line.trim();
    if (text === "" || text.startsWith("#") || text.startsWith("%")) return false;
    const { names } = this.layout;
    if (cells.length === names.length + 1 && cells.at(-1)!.trim() === "") return true;
    const advice = this.raggedAdvice(cells.length, line);
    throw new AppError(
      "HISTORY_INVALID",
      `cannot use ${this.shown}: a line has ${cells.length} ${cells.length === 1 ? "value" : "values"} where the header names ${names.length} columns`,
      { where: `${this.shown}:${lineNumber}`, fix: advice },
    );
  }

  private raggedAdvice(count: number, line: string): string {
    if (line.includes('"')) return "Check its quotation marks: numbers need none.";
    if (this.layout.commaParts && count > this.layout.names.length)
      return "Numbers with a decimal comma need semicolons between the columns.";
    return "Complete the line or delete it. A last line cut short means that the file was still being written, or copied in part.";
  }

  private checkTime(time: number, lineNumber: number): void {
    if (time > this.lastTime && time < Infinity) {
      this.lastTime = time;
      return;
    }
    const what = !Number.isFinite(time)
      ? `the time is ${time}`
      : time === this.lastTime
        ? `the time ${time} comes twice`
        : `the time falls from ${this.lastTime} to ${time}`;
    throw new AppError("HISTORY_INVALID", `cannot use ${this.shown}: ${what}`, {
      where: this.place(lineNumber, this.kept[0]!),
      fix: "Time has to rise from line to line. Where a restarted solver wrote steps again, keep one copy; if another column is the time, name it with --time.",
    });
  }

  private badCell(cell: string, lineNumber: number, column: number): AppError {
    const text = cell.trim();
    const what = text === "" ? "a cell is empty" : `${JSON.stringify(shorten(text))} is not a number`;
    const fix =
      hasDecimalComma(text) || this.decimalComma
        ? "Write all numbers of the file with the same decimal mark; with a decimal comma, part the columns by semicolons."
        : "Correct the cell; a value that is missing is written NaN. To leave columns of text out, name the ones to read with --channel.";
    return new AppError("HISTORY_INVALID", `cannot use ${this.shown}: ${what}`, {
      where: this.place(lineNumber, column),
      fix,
    });
  }

  private tooLarge(lineNumber: number): AppError {
    return new AppError("TOO_LARGE", `${this.shown} holds more than ${VALUES_MAX} numbers`, {
      where: `${this.shown}:${lineNumber}`,
      fix: "Name the columns that matter with --channel, or keep every second step.",
    });
  }

  private place(lineNumber: number, column: number): string {
    return `${this.shown}:${lineNumber}:${column + 1} (column ${column + 1}, ${JSON.stringify(this.layout.names[column])})`;
  }
}

function shorten(text: string): string {
  return text.length > 40 ? `${text.slice(0, 40)}…` : text;
}
