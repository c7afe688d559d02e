import fc from "fast-check";
import { expect, it } from "vitest";
import { samplesNeeded } from "../../../../checks/mean/samples-needed.ts";

it("a half-width 1.5 times too wide over samples 200 to 1000 needs 200 + 800·2.25·1.1 = 2180, a quarter less to a half more", () => {
  expect(samplesNeeded(1000, 200, 1.5)).toEqual([1635, 3270]);
});

it("asks for at least a quarter more and for at most four times as much, low before high", () => {
  fc.assert(
    fc.property(
      fc.integer({ min: 200, max: 1_000_000 }),
      fc.double({ min: 0, max: 0.9, noNaN: true }),
      fc.double({ min: 0, noNaN: true }),
      (n, share, ratio) => {
        const [low, high] = samplesNeeded(n, Math.floor(share * n), ratio);
        expect(low).toBeGreaterThanOrEqual(1.25 * n);
        expect(high).toBeLessThanOrEqual(4 * n);
        expect(low).toBeLessThanOrEqual(high);
      },
    ),
  );
});
