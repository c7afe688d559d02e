/** Lines that are kept, and characters of each. */
const LINES_MAX = 40;
const LINE_MAX = 500;

/** Keeps the last lines of a stream of text, however much there is of it. */
export class LastLines {
  #lines: string[] = [];
  #rest = "";

  /** Takes the next piece of text. */
  add(text: string): void {
    const parts = (this.#rest + text.slice(-LINES_MAX * LINE_MAX)).split(/\r?\n/);
    this.#rest = (parts.pop() ?? "").slice(-LINE_MAX);
    this.#lines.push(...parts.map((line) => line.slice(0, LINE_MAX)));
    this.#lines = this.#lines.slice(-LINES_MAX);
  }

  /** The last lines, oldest first; one that is not finished counts. */
  get lines(): readonly string[] {
    return this.#rest === "" ? this.#lines : [...this.#lines, this.#rest];
  }
}
