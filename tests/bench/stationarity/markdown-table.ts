import type { Characteristics, Estimate } from "./measure.ts";

/** A table of characteristics for people, one row a scenario, standard errors in brackets. */
export function markdownTable(rows: readonly Characteristics[]): string {
  const head = [
    "| scenario | records | accepted % | covered % | within tolerance % | samples over oracle | half-width over ideal |",
    "|---|---|---|---|---|---|---|",
  ];
  return [...head, ...rows.map(line)].join("\n");
}

function line(row: Characteristics): string {
  const cells = [
    row.scenario,
    String(row.replications),
    percent(row.accepted),
    percent(row.coverage),
    percent(row.withinTolerance),
    plain(row.cost),
    plain(row.halfWidthOverIdeal),
  ];
  return `| ${cells.join(" | ")} |`;
}

function percent(estimate: Estimate | null): string {
  if (estimate === null) return "–";
  return `${(100 * estimate.value).toFixed(1)} (${(100 * estimate.se).toFixed(1)})`;
}

function plain(estimate: Estimate | null): string {
  return estimate === null ? "–" : `${estimate.value.toFixed(2)} (${estimate.se.toFixed(2)})`;
}
