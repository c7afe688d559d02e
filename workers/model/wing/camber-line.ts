/** A thin camber line over a chord of length 1: height and slope at the place behind the leading edge. */
export interface CamberLine {
  readonly heightAt: (xi: number) => number;
  readonly slopeAt: (xi: number) => number;
}

/**
 * Camber line of two parabolas that meet at the largest camber m, place p; the line goes on straight behind the trailing edge.
 *
 *   z = m/p² (2pξ - ξ²) for ξ < p,  m/(1-p)² (1 - 2p + 2pξ - ξ²) behind
 *
 * @see Abbott & von Doenhoff, Theory of Wing Sections, §6.4 (from memory)
 */
export function camberLine(camberPercent: number, positionPercent: number): CamberLine {
  const m = camberPercent / 100;
  const p = positionPercent / 100;
  const slopeAt = (xi: number): number => {
    const x = Math.min(1, xi);
    return x < p ? (2 * m * (p - x)) / (p * p) : (2 * m * (p - x)) / ((1 - p) * (1 - p));
  };
  const heightAt = (xi: number): number => {
    const x = Math.min(1, xi);
    const z =
      x < p
        ? (m * (2 * p * x - x * x)) / (p * p)
        : (m * (1 - 2 * p + 2 * p * x - x * x)) / ((1 - p) * (1 - p));
    return z + (xi - x) * slopeAt(1);
  };
  return { heightAt, slopeAt };
}
