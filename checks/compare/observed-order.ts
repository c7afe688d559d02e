/** How a quantity behaves over three levels of refinement, with the order of convergence where there is one. */
export type ObservedOrder =
  | { readonly kind: "monotone" | "oscillatory"; readonly order: number }
  | { readonly kind: "divergent" | "oscillatory-divergent" | "unchanged"; readonly order: null };

/** Three values from fine to coarse, with the ratios of neighbouring sizes, r21 = h2/h1 and r32 = h3/h2. */
export interface Triplet {
  readonly values: readonly [number, number, number];
  readonly r21: number;
  readonly r32: number;
}

const ITERATIONS_MAX = 200;
const ORDER_MAX = 1000;

/**
 * Observed order of convergence of three levels whose refinement ratio need not be constant.
 *
 *   φ(h) = φ0 + C·h^p, ε21 = φ2 − φ1, ε32 = φ3 − φ2, s = sign(ε32/ε21)
 *   p = [ln|ε32/ε21| + ln((r21^p − s)/(r32^p − s))] / ln r21, solved by fixed-point iteration from q = 0
 *
 * The published form takes the modulus of the bracket, which lends a positive order to a sequence that runs away. Here a
 * triplet has an order only if the equation has a positive root: for s = 1 if ε32/ε21 > ln r32/ln r21 (its limit for
 * p → 0), for s = −1 if |ε32/ε21| > 1; all others are named divergent. The equation is monotone in p, so the root is
 * the only one; where the iteration does not come to rest it is bisected.
 *
 * Limits: exact for a single power of h; says nothing of whether the levels lie where that holds. Alternating values have
 * no single power of h behind them: their order is a figure of the procedure only.
 *
 * @param triplet finite values, fine to coarse; ratios above 1
 * @returns order > 0; `unchanged` where the finer two are equal, whatever the coarse one does
 * @see Celik, Ghia, Roache, Freitas, Coleman & Raad (2008), J. Fluids Eng. 130, 078001, equation 3; Stern et al. (2001) for the names
 */
export function observedOrder({ values: [fine, medium, coarse], r21, r32 }: Triplet): ObservedOrder {
  const e21 = medium - fine;
  const e32 = coarse - medium;
  if (e21 === 0) return { kind: "unchanged", order: null };
  const ratio = e32 / e21;
  const oscillates = ratio < 0;
  const least = oscillates ? 1 : Math.log(r32) / Math.log(r21);
  if (!(Math.abs(ratio) > least))
    return { kind: oscillates ? "oscillatory-divergent" : "divergent", order: null };
  const order = solveOrder(Math.log(Math.abs(ratio)), r21, r32, oscillates ? -1 : 1);
  return { kind: oscillates ? "oscillatory" : "monotone", order };
}

function solveOrder(logRatio: number, r21: number, r32: number, s: number): number {
  const next = (p: number) => (logRatio + q(p, r21, r32, s)) / Math.log(r21);
  let p = logRatio / Math.log(r21);
  for (let i = 0; i < ITERATIONS_MAX; i++) {
    const following = next(p);
    if (!(following > 0)) break;
    if (Math.abs(following - p) <= 1e-13 * following) return following;
    p = following;
  }
  return bisected((order) => order - next(order));
}

/** ln((r21^p − s)/(r32^p − s)), without overflow at large p and without cancellation at small p. */
function q(p: number, r21: number, r32: number, s: number): number {
  return logPowerLess(p * Math.log(r21), s) - logPowerLess(p * Math.log(r32), s);
}

/** ln(e^x − s) for x > 0 and s of ±1. */
function logPowerLess(x: number, s: number): number {
  return s > 0 ? x + Math.log(-Math.expm1(-x)) : x + Math.log1p(Math.exp(-x));
}

/** Root of a rising function between 0 and the largest order that is looked for. */
function bisected(rising: (p: number) => number): number {
  let low = 0;
  let high = ORDER_MAX;
  for (let i = 0; i < ITERATIONS_MAX && high - low > 1e-14 * high; i++) {
    const middle = (low + high) / 2;
    if (rising(middle) > 0) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
}
