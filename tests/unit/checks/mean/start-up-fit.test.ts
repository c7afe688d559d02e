import { describe, expect, it } from "vitest";
import { autoregression, leastSquares } from "../../../../checks/index.ts";
import { levelBesideStartUp } from "../../../../checks/mean/start-up-fit.ts";
import { autoregressive } from "../../../bench/stationarity/families/noise.ts";
import { randomStream } from "../../../bench/stationarity/random.ts";

const m = 1000;
const noise = (seed: number) => autoregressive(0.5).make(randomStream(seed), m);
const inverseTimes = Float64Array.from({ length: m }, (_, i) => Math.log1p(1 / (i + 1)));
const beside = (seed: number, tail: (i: number) => number) =>
  levelBesideStartUp(
    noise(seed).map((v, i) => 7 + v + tail(i)),
    inverseTimes,
    autoregression(noise(seed)),
  )!;
/** sqrt of the long-run variance of the noise over the blocks: what an oracle's level is uncertain by. */
const oracle = Math.sqrt(3 / m);

describe("level beside a start-up", () => {
  it("recognises an exponential, and finds the level within 3 standard errors though 12 % of the record is start-up", () => {
    const { level, se, shape } = beside(515_000_003, (i) => -9 * Math.exp(-i / 40));
    expect(shape).not.toBe("inverse");
    expect(Math.abs(level - 7)).toBeLessThan(3 * se);
    expect(se).toBeLessThan(2 * oracle);
  });
  it("takes out a 1/t tail that biases the plain mean of the last two thirds by five standard errors", () => {
    const height = 400;
    const { level, se, shape } = beside(525_000_007, (i) => -height / (i + 1));
    expect(height * (Math.log(3) / (2 / 3) / m)).toBeGreaterThan(5 * oracle);
    expect(shape).toBe("inverse");
    expect(Math.abs(level - 7)).toBeLessThan(3 * se);
  });
  it("costs a record without start-up less than a third in standard error", () => {
    const { se, shape } = beside(535_000_009, () => 0);
    expect(shape).toBe("inverse");
    expect(se / oracle).toBeGreaterThan(0.9);
    expect(se / oracle).toBeLessThan(1.35);
  });
  it("names a drift that no start-up explains, and none where a start-up explains it better", () => {
    expect(Math.abs(beside(545_000_011, (i) => i / 1000).trendT!)).toBeGreaterThan(4);
    expect(beside(545_000_011, (i) => -9 * Math.exp(-i / 40)).trendT).toBeNull();
  });
  it("says nothing without noise or with too few blocks", () => {
    const flat = new Float64Array(m).fill(2);
    expect(levelBesideStartUp(flat, inverseTimes, autoregression(flat))).toBeNull();
    const few = noise(1).subarray(0, 8);
    expect(levelBesideStartUp(few, inverseTimes.subarray(0, 8), autoregression(few))).toBeNull();
  });
});

describe("least squares", () => {
  it("of 0, 1, 1, 2 on 1 and 0..3 is 0.1 + 0.6 u, with squares 0.2 left and leverage 1/5 of the slope", () => {
    const found = leastSquares(Float64Array.of(0, 1, 1, 2), [
      Float64Array.of(1, 1, 1, 1),
      Float64Array.of(0, 1, 2, 3),
    ])!;
    expect(found.coefficients[0]).toBeCloseTo(0.1, 13);
    expect(found.coefficients[1]).toBeCloseTo(0.6, 13);
    expect(found.leverages[1]).toBeCloseTo(0.2, 13);
    expect(found.residualSquares).toBeCloseTo(0.2, 13);
  });
  it("refuses regressors that can't be told apart, or are nothing", () => {
    const one = Float64Array.of(1, 1, 1, 1);
    expect(leastSquares(one, [one, one.map((v) => 3 * v)])).toBeNull();
    expect(leastSquares(one, [one, new Float64Array(4)])).toBeNull();
  });
});
