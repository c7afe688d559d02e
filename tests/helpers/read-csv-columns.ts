import { readFileSync } from "node:fs";

/** Columns of a small CSV of numbers with a header line, as typed arrays. */
export function readCsvColumns(url: URL): Record<string, Float64Array> {
  const [head, ...lines] = readFileSync(url, "utf8").trim().split("\n");
  const rows = lines.map((line) => line.split(",").map(Number));
  return Object.fromEntries(
    head!.split(",").map((name, j) => [name, Float64Array.from(rows, (row) => row[j]!)]),
  );
}
