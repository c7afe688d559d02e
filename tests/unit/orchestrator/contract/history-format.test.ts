import { crc32 as zlibCrc32 } from "node:zlib";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  AppError,
  crc32,
  decodeHistory,
  encodeHistoryBlock,
  encodeHistoryEnd,
  encodeHistoryHead,
  type HistorySamples,
} from "../../../../orchestrator/contract/index.ts";

const head = {
  runId: "0123456789ab",
  attempt: 1,
  legId: "x.1.1",
  dtSeconds: 0.01,
  channels: ["CN", "Cm"],
  units: ["1", "1"],
};

function stretch(fromStep: number, values: readonly (readonly [number, number])[]): HistorySamples {
  return {
    fromStep,
    times: Float64Array.from(values, (_, i) => (fromStep + i) * 0.01),
    columns: [Float64Array.from(values, (v) => v[0]), Float64Array.from(values, (v) => v[1])],
  };
}

function file(blocks: readonly HistorySamples[]): Uint8Array {
  const rows = blocks.reduce((sum, block) => sum + block.times.length, 0);
  return new Uint8Array(
    Buffer.concat([encodeHistoryHead(head), ...blocks.map(encodeHistoryBlock), encodeHistoryEnd(rows)]),
  );
}

describe("a CRC-32", () => {
  it("is 0xcbf43926 for the digits 1 to 9, the check value of ISO 3309 (from memory)", () => {
    expect(crc32(new TextEncoder().encode("123456789"))).toBe(0xcbf43926);
  });

  it("is zlib's for any bytes, in one piece or two", () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 300 }), fc.nat(300), (bytes, cut) => {
        const at = Math.min(cut, bytes.length);
        expect(crc32(bytes)).toBe(zlibCrc32(bytes));
        expect(crc32(bytes.subarray(at), crc32(bytes.subarray(0, at)))).toBe(zlibCrc32(bytes));
      }),
    );
  });
});

describe("a history file", () => {
  it("gives back every bit, not-a-number and minus zero included", () => {
    const value = fc.double({ noDefaultInfinity: false });
    fc.assert(
      fc.property(
        fc.array(fc.tuple(value, value), { minLength: 1, maxLength: 40 }),
        fc.nat(39),
        (rows, cut) => {
          const at = Math.min(cut, rows.length);
          const blocks = [rows.slice(0, at), rows.slice(at)].filter((part) => part.length > 0);
          let next = 1;
          const bytes = file(
            blocks.map((part) => {
              const block = stretch(next, part);
              next += part.length;
              return block;
            }),
          );
          const read = decodeHistory(bytes, "x.history");
          expect(read.head).toEqual(head);
          expect(read.samples.fromStep).toBe(1);
          rows.forEach(([a, b], i) => {
            expect(Object.is(read.samples.columns[0]![i], a)).toBe(true);
            expect(Object.is(read.samples.columns[1]![i], b)).toBe(true);
          });
        },
      ),
    );
  });

  it("cannot lose or change a byte unnoticed, and names file and place", () => {
    const whole = file([
      stretch(5, [
        [1, 2],
        [3, 4],
      ]),
      stretch(7, [[5, 6]]),
    ]);
    const refusals = new Set<string>();
    for (let at = 0; at < whole.length; at++) {
      const flipped = whole.slice();
      flipped[at]! ^= 1 << (at % 8);
      refusals.add(refusal(flipped));
      refusals.add(refusal(whole.slice(0, at)));
    }
    expect([...refusals].sort()).toEqual([
      "x.history, block 1",
      "x.history, block 2",
      "x.history, block 3",
      "x.history, end mark",
      "x.history, head",
    ]);
  });

  it("refuses a block that does not follow the one before", () => {
    expect(refusal(file([stretch(1, [[1, 2]]), stretch(3, [[3, 4]])]))).toContain("x.history, block 2");
  });
});

function refusal(bytes: Uint8Array): string {
  try {
    decodeHistory(bytes, "x.history");
  } catch (error) {
    if (error instanceof AppError && error.code === "HISTORY_DAMAGED") return error.where ?? "";
    throw error;
  }
  throw new Error("the damage was not noticed");
}
