/** A curve through given values: value and derivative at a time. */
export interface Spline {
  readonly valueAt: (t: number) => number;
  readonly slopeAt: (t: number) => number;
}

/**
 * Cubic spline with continuous second derivative through (t, y).
 *
 *   Natural ends (zero second derivative), or periodic where `closed`: then the last value is that of the first.
 *
 * The second derivatives solve a tridiagonal system; the periodic one is cyclic and solved by the Sherman–Morrison formula.
 *
 * @param t shape [n], n >= 4, rising
 * @param y shape [n]
 * @returns the spline; outside [t_0, t_n-1] it goes on straight, or repeats where closed
 * @see de Boor, A Practical Guide to Splines (from memory)
 */
export function cubicSpline(t: readonly number[], y: readonly number[], closed: boolean): Spline {
  const second = closed ? periodicSecond(t, y) : naturalSecond(t, y);
  const first = t[0]!;
  const last = t.at(-1)!;
  const wrap = (at: number): number => {
    if (!closed) return at;
    const period = last - first;
    return at - period * Math.floor((at - first) / period);
  };
  const inside = (at: number) => Math.min(last, Math.max(first, at));
  const slope = (at: number): number => pieceAt(t, y, second, inside(at)).slope;
  return {
    valueAt: (at) => {
      const w = wrap(at);
      const clamped = inside(w);
      return pieceAt(t, y, second, clamped).value + (w - clamped) * slope(clamped);
    },
    slopeAt: (at) => slope(wrap(at)),
  };
}

function pieceAt(
  t: readonly number[],
  y: readonly number[],
  m: readonly number[],
  at: number,
): { value: number; slope: number } {
  let low = 0;
  let high = t.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (t[middle]! <= at) low = middle;
    else high = middle;
  }
  const h = t[high]! - t[low]!;
  const a = (t[high]! - at) / h;
  const b = 1 - a;
  const bend = ((a * a * a - a) * m[low]! + (b * b * b - b) * m[high]!) * ((h * h) / 6);
  const turn = ((3 * b * b - 1) * m[high]! - (3 * a * a - 1) * m[low]!) * (h / 6);
  return { value: a * y[low]! + b * y[high]! + bend, slope: (y[high]! - y[low]!) / h + turn };
}

function naturalSecond(t: readonly number[], y: readonly number[]): number[] {
  const n = t.length - 2;
  const h = (i: number) => t[i + 1]! - t[i]!;
  const rise = (i: number) => (y[i + 1]! - y[i]!) / h(i);
  const inner = solveTridiagonal(
    Array.from({ length: n }, (_, i) => (i === 0 ? 0 : h(i) / 6)),
    Array.from({ length: n }, (_, i) => (h(i) + h(i + 1)) / 3),
    Array.from({ length: n }, (_, i) => (i === n - 1 ? 0 : h(i + 1) / 6)),
    Array.from({ length: n }, (_, i) => rise(i + 1) - rise(i)),
  );
  return [0, ...inner, 0];
}

function periodicSecond(t: readonly number[], y: readonly number[]): number[] {
  const n = t.length - 1;
  const h = (i: number) => t[((i + n) % n) + 1]! - t[(i + n) % n]!;
  const rise = (i: number) => (y[((i + n) % n) + 1]! - y[(i + n) % n]!) / h(i);
  const corner = h(-1) / 6;
  const shift = -(h(-1) + h(0)) / 3;
  const below = Array.from({ length: n }, (_, i) => (i === 0 ? 0 : h(i - 1) / 6));
  const above = Array.from({ length: n }, (_, i) => (i === n - 1 ? 0 : h(i) / 6));
  const middle = Array.from({ length: n }, (_, i) => (h(i - 1) + h(i)) / 3);
  middle[0] = middle[0]! - shift;
  middle[n - 1] = middle[n - 1]! - (corner * corner) / shift;
  const right = Array.from({ length: n }, (_, i) => rise(i) - rise(i - 1));
  const u = Array.from({ length: n }, (_, i) => (i === 0 ? shift : i === n - 1 ? corner : 0));
  const z = solveTridiagonal(below, middle, above, right);
  const q = solveTridiagonal(below, middle, above, u);
  const factor = (z[0]! + (corner / shift) * z[n - 1]!) / (1 + q[0]! + (corner / shift) * q[n - 1]!);
  const inner = z.map((value, i) => value - factor * q[i]!);
  return [...inner, inner[0]!];
}

/** Thomas's algorithm for a diagonally dominant tridiagonal system. */
function solveTridiagonal(
  below: readonly number[],
  middle: readonly number[],
  above: readonly number[],
  right: readonly number[],
): number[] {
  const n = middle.length;
  const c = new Array<number>(n).fill(0);
  const d = new Array<number>(n).fill(0);
  for (let i = 0; i < n; i++) {
    const pivot = middle[i]! - (i > 0 ? below[i]! * c[i - 1]! : 0);
    c[i] = above[i]! / pivot;
    d[i] = (right[i]! - (i > 0 ? below[i]! * d[i - 1]! : 0)) / pivot;
  }
  for (let i = n - 2; i >= 0; i--) d[i] = d[i]! - c[i]! * d[i + 1]!;
  return d;
}
