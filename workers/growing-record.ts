import type { HistorySamples } from "../orchestrator/contract/index.ts";

const ROWS_AT_FIRST = 256;

/** A history in memory while it grows: one column a channel, doubled when full. */
export class GrowingRecord {
  readonly channels: number;
  #times = new Float64Array(ROWS_AT_FIRST);
  #columns: Float64Array<ArrayBuffer>[];
  #length = 0;

  constructor(channels: number) {
    this.channels = channels;
    this.#columns = Array.from({ length: channels }, () => new Float64Array(ROWS_AT_FIRST));
  }

  /** Samples so far. */
  get length(): number {
    return this.#length;
  }

  /** Adds one sample; `values` holds a value a channel. */
  push(time: number, values: Float64Array): void {
    this.#reserve(this.#length + 1);
    this.#times[this.#length] = time;
    for (let c = 0; c < this.channels; c++) this.#columns[c]![this.#length] = values[c]!;
    this.#length += 1;
  }

  /** Adds a stretch that follows what is there. */
  append(samples: HistorySamples): void {
    this.#reserve(this.#length + samples.times.length);
    this.#times.set(samples.times, this.#length);
    for (let c = 0; c < this.channels; c++) this.#columns[c]!.set(samples.columns[c]!, this.#length);
    this.#length += samples.times.length;
  }

  /** Copies the sample at `index`, counted from 0, into `out`. */
  read(index: number, out: Float64Array): void {
    for (let c = 0; c < this.channels; c++) out[c] = this.#columns[c]![index]!;
  }

  /** Samples `from` (in) to `to` (out), as views that hold until the record grows again. */
  view(from: number, to: number): HistorySamples {
    return {
      fromStep: from + 1,
      times: this.#times.subarray(from, to),
      columns: this.#columns.map((column) => column.subarray(from, to)),
    };
  }

  #reserve(rows: number): void {
    if (rows <= this.#times.length) return;
    const size = Math.max(rows, 2 * this.#times.length);
    const grown = (column: Float64Array): Float64Array<ArrayBuffer> => {
      const larger = new Float64Array(size);
      larger.set(column);
      return larger;
    };
    this.#times = grown(this.#times);
    this.#columns = this.#columns.map(grown);
  }
}
