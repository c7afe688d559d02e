/** A stretch of the span in which strips cluster. */
export interface Cluster {
  readonly atM: number;
  readonly radiusM: number;
}

/** Intervals in which the density of strips is summed up. */
const GRID = 4096;
/** Weight of the tips' share in the density, against 1 for a uniform one. */
const TIP_WEIGHT = 0.5;
/** Weight of a cluster's share at its middle. */
const CLUSTER_WEIGHT = 1;

/**
 * Edges of the strips along the span. Their density is a uniform share, a share that grows towards the tips as in a
 * cosine distribution, and a flat-topped share over each cluster.
 *
 *   d(y) = 1 + w_t / √(1 - η² + 0.02) + Σ w_c exp(-((y - y_c) / 1.2 r_c)^4),  η = 2y/b
 *
 * Weights are common practice, no source.
 *
 * @returns shape [strips + 1], rising from -span/2 to span/2; symmetric where the clusters are
 */
export function stripEdges(spanM: number, strips: number, clusters: readonly Cluster[]): Float64Array {
  const half = spanM / 2;
  const density = (y: number): number => {
    const eta = y / half;
    const tips = TIP_WEIGHT / Math.sqrt(Math.max(0, 1 - eta * eta) + 0.02);
    const bumps = clusters.reduce(
      (sum, { atM, radiusM }) => sum + CLUSTER_WEIGHT * Math.exp(-(((y - atM) / (1.2 * radiusM)) ** 4)),
      0,
    );
    return 1 + tips + bumps;
  };
  const sums = new Float64Array(GRID + 1);
  for (let i = 0; i < GRID; i++) sums[i + 1] = sums[i]! + density(-half + ((i + 0.5) / GRID) * spanM);
  const edges = new Float64Array(strips + 1);
  for (let j = 0, i = 0; j <= strips; j++) {
    const wanted = (j / strips) * sums[GRID]!;
    while (i < GRID - 1 && sums[i + 1]! < wanted) i++;
    const part = (wanted - sums[i]!) / (sums[i + 1]! - sums[i]!);
    edges[j] = -half + ((i + part) / GRID) * spanM;
  }
  edges[0] = -half;
  edges[strips] = half;
  return edges;
}
