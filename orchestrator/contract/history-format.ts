import { z } from "zod";
import { AppError } from "./app-error.ts";
import { crc32 } from "./crc32.ts";

// A history file is a head, blocks of samples, and an end mark, all little-endian:
//   head   "mwhist01", u32 length of JSON, JSON, u32 CRC of the JSON
//   block  u32 BLOCK, u32 rows, u32 columns, u32 first step, columns one after the other as float64, u32 CRC of the block
//   end    u32 END, u32 rows in all, u32 CRC of the end mark
// The first column is time. A file without its end mark is not finished and counts for nothing.

const MAGIC = "mwhist01";
const BLOCK = 0x4b434c42;
const END = 0x21444e45;
const BLOCK_HEAD = 16;

const headSchema = z.object({
  runId: z.string(),
  attempt: z.int().min(1),
  legId: z.string(),
  dtSeconds: z.number(),
  channels: z.array(z.string()),
  units: z.array(z.string()),
});

/** What a history file says about itself. */
export type HistoryHead = z.infer<typeof headSchema>;

/** Samples of a stretch: one column a channel, and their times. */
export interface HistorySamples {
  /** Step of the first sample; the others follow one by one. */
  readonly fromStep: number;
  readonly times: Float64Array;
  /** In the order of the head's channels. */
  readonly columns: readonly Float64Array[];
}

/** Bytes of a head. */
export function encodeHistoryHead(head: HistoryHead): Uint8Array {
  const json = new TextEncoder().encode(JSON.stringify(head));
  const bytes = new Uint8Array(MAGIC.length + 8 + json.length);
  const view = new DataView(bytes.buffer);
  bytes.set(new TextEncoder().encode(MAGIC));
  view.setUint32(8, json.length, true);
  bytes.set(json, 12);
  view.setUint32(12 + json.length, crc32(json), true);
  return bytes;
}

/** Bytes of one block. */
export function encodeHistoryBlock(samples: HistorySamples): Uint8Array {
  const columns = [samples.times, ...samples.columns];
  const rows = samples.times.length;
  const bytes = new Uint8Array(BLOCK_HEAD + 8 * rows * columns.length + 4);
  const view = new DataView(bytes.buffer);
  [BLOCK, rows, columns.length, samples.fromStep].forEach((word, i) => {
    view.setUint32(4 * i, word, true);
  });
  let at = BLOCK_HEAD;
  for (const column of columns) for (let i = 0; i < rows; i++, at += 8) view.setFloat64(at, column[i]!, true);
  view.setUint32(at, crc32(bytes.subarray(0, at)), true);
  return bytes;
}

/** Bytes of an end mark. */
export function encodeHistoryEnd(rows: number): Uint8Array {
  const bytes = new Uint8Array(12);
  const view = new DataView(bytes.buffer);
  view.setUint32(0, END, true);
  view.setUint32(4, rows, true);
  view.setUint32(8, crc32(bytes.subarray(0, 8)), true);
  return bytes;
}

/**
 * Reads a whole history file.
 *
 * @throws HISTORY_DAMAGED naming the file and the block, counted from 1
 */
export function decodeHistory(
  bytes: Uint8Array,
  file: string,
): { head: HistoryHead; samples: HistorySamples } {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const { head, next } = decodeHead(bytes, view, file);
  const blocks: HistorySamples[] = [];
  let at = next;
  for (;;) {
    const where = `${file}, block ${blocks.length + 1}`;
    if (at + 12 > bytes.length) throw damaged("the file ends before its end mark", where);
    const tag = view.getUint32(at, true);
    if (tag === END) break;
    if (tag !== BLOCK) throw damaged("what should be a block is none", where);
    const block = decodeBlock(bytes, view, at, where);
    if (block.samples.columns.length !== head.channels.length)
      throw damaged(
        `${block.samples.columns.length} channels, the head names ${head.channels.length}`,
        where,
      );
    const last = blocks.at(-1);
    if (last !== undefined && last.fromStep + last.times.length !== block.samples.fromStep)
      throw damaged("it does not follow the block before", where);
    blocks.push(block.samples);
    at = block.next;
  }
  const samples = joinHistory(blocks, head.channels.length);
  if (crc32(bytes.subarray(at, at + 8)) !== view.getUint32(at + 8, true))
    throw damaged("the end mark's check sum is wrong", `${file}, end mark`);
  if (view.getUint32(at + 4, true) !== samples.times.length)
    throw damaged(
      `${samples.times.length} samples, the end mark counts ${view.getUint32(at + 4, true)}`,
      file,
    );
  return { head, samples };
}

/** One stretch out of stretches that follow each other. */
export function joinHistory(pieces: readonly HistorySamples[], channels: number): HistorySamples {
  const rows = pieces.reduce((sum, piece) => sum + piece.times.length, 0);
  const joined = (pick: (piece: HistorySamples) => Float64Array): Float64Array => {
    const all = new Float64Array(rows);
    let at = 0;
    for (const piece of pieces) {
      const part = pick(piece);
      all.set(part, at);
      at += part.length;
    }
    return all;
  };
  return {
    fromStep: pieces[0]?.fromStep ?? 1,
    times: joined((piece) => piece.times),
    columns: Array.from({ length: channels }, (_, c) => joined((piece) => piece.columns[c]!)),
  };
}

function decodeHead(bytes: Uint8Array, view: DataView, file: string): { head: HistoryHead; next: number } {
  const where = `${file}, head`;
  if (bytes.length < 16 || new TextDecoder().decode(bytes.subarray(0, 8)) !== MAGIC)
    throw damaged("it does not begin like a history file", where);
  const length = view.getUint32(8, true);
  if (16 + length > bytes.length) throw damaged("the file ends within its head", where);
  const json = bytes.subarray(12, 12 + length);
  if (crc32(json) !== view.getUint32(12 + length, true)) throw damaged("the check sum is wrong", where);
  return { head: headSchema.parse(JSON.parse(new TextDecoder().decode(json))), next: 16 + length };
}

function decodeBlock(
  bytes: Uint8Array,
  view: DataView,
  at: number,
  where: string,
): { samples: HistorySamples; next: number } {
  if (at + BLOCK_HEAD > bytes.length) throw damaged("the file ends within it", where);
  const [rows, columns, fromStep] = [4, 8, 12].map((offset) => view.getUint32(at + offset, true)) as [
    number,
    number,
    number,
  ];
  const end = at + BLOCK_HEAD + 8 * rows * columns;
  if (end + 4 > bytes.length) throw damaged("the file ends within it", where);
  if (crc32(bytes.subarray(at, end)) !== view.getUint32(end, true))
    throw damaged("the check sum is wrong", where);
  const column = (c: number): Float64Array => {
    const values = new Float64Array(rows);
    const from = at + BLOCK_HEAD + 8 * rows * c;
    for (let i = 0; i < rows; i++) values[i] = view.getFloat64(from + 8 * i, true);
    return values;
  };
  const channels = Array.from({ length: columns - 1 }, (_, c) => column(c + 1));
  return { samples: { fromStep, times: column(0), columns: channels }, next: end + 4 };
}

function damaged(what: string, where: string): AppError {
  return new AppError("HISTORY_DAMAGED", `a history file is damaged: ${what}`, {
    where,
    fix: "Restore the file from a copy. Without one, remove the run and launch the campaign again: it is computed anew.",
  });
}
