// Double-precision build of the segment formula: two evaluation points in the two lanes of a vector. Operations and order
// are those of the plain loop (typescript-kernel.ts), which states them; the bits are the same. For the shape of the loop
// see mixed-lanes.ts.

/** Bytes a node: x, y, z, μ² and two edges of six numbers each, as in node-records.ts. */
const RECORD: usize = 128;
const CORE: usize = 24;
const SPANWISE: usize = 32;
const STREAMWISE: usize = 80;

/** Scratch, a vector each: totals u, v, w, points x, y, z, row sums u, v, w; then as in mixed-lanes.ts. */
const POINTS: usize = 48;
const SUMS: usize = 96;
const FAR: usize = 144;

/** Bytes of a place: r and R. */
const PLACE: usize = 64;

/** p - x of one coordinate for two points. */
function difference(point: usize, node: usize): v128 {
  return f64x2.sub(v128.load(point), v128.load64_splat(node));
}

/** √(((rx² + ry²) + rz²) + μ²) */
function distance(rx: v128, ry: v128, rz: v128, node: usize): v128 {
  const plane = f64x2.add(f64x2.mul(rx, rx), f64x2.mul(ry, ry));
  return f64x2.sqrt(f64x2.add(f64x2.add(plane, f64x2.mul(rz, rz)), v128.load64_splat(node, CORE)));
}

/** Factor of e×r for the edge at `edge`, whose far end lies at distance `far` and whose near end at `near`. */
function factor(edge: usize, far: v128, near: v128): v128 {
  const s = f64x2.add(far, near);
  const square = f64x2.sub(f64x2.mul(s, s), v128.load64_splat(edge, 24));
  const den = f64x2.pmax(square, v128.load64_splat(edge, 32));
  return f64x2.div(f64x2.mul(v128.load64_splat(edge, 40), s), f64x2.mul(f64x2.mul(far, near), den));
}

/** Adds k (e×r) of one edge to the row's sum. */
function addEdge(sum: usize, edge: usize, k: v128, rx: v128, ry: v128, rz: v128): void {
  const ex = v128.load64_splat(edge);
  const ey = v128.load64_splat(edge, 8);
  const ez = v128.load64_splat(edge, 16);
  const u = f64x2.sub(f64x2.mul(ey, rz), f64x2.mul(ez, ry));
  v128.store(sum, f64x2.add(v128.load(sum), f64x2.mul(k, u)));
  const v = f64x2.sub(f64x2.mul(ez, rx), f64x2.mul(ex, rz));
  v128.store(sum, f64x2.add(v128.load(sum, 16), f64x2.mul(k, v)), 16);
  const w = f64x2.sub(f64x2.mul(ex, ry), f64x2.mul(ey, rx));
  v128.store(sum, f64x2.add(v128.load(sum, 32), f64x2.mul(k, w)), 32);
}

/** Adds the two numbers at `sum` to those at `at`. */
function addTo(at: usize, sum: usize): void {
  v128.store(at, f64x2.add(v128.load(at), v128.load(sum)));
}

/** Moves a row's sum into the totals and sets it to zero. */
function closeRow(totals: usize, sum: usize): void {
  for (let end = sum + 48; sum < end; sum += 16, totals += 16) {
    addTo(totals, sum);
    v128.store(sum, f64x2.splat(0));
  }
}

/** Takes the points from the nodes of a row: for each node, r and R are written to `places`. */
function place(node: usize, places: usize, end: usize, p: usize): void {
  for (; places < end; places += PLACE, node += RECORD) {
    const rx = difference(p, node);
    const ry = difference(p + 16, node + 8);
    const rz = difference(p + 32, node + 16);
    v128.store(places, rx);
    v128.store(places, ry, 16);
    v128.store(places, rz, 32);
    v128.store(places, distance(rx, ry, rz, node), 48);
  }
}

/** Totals of the nodes from `node` to `last` at two points; column 0 has a spanwise edge of zero strength. */
function sweep(node: usize, last: usize, cols: i32, scratch: usize): void {
  const sum = scratch + SUMS;
  const places = scratch + FAR + <usize>cols * 16;
  const end = places + <usize>cols * PLACE;
  while (node < last) {
    place(node, places, end, scratch + POINTS);
    let left = f64x2.splat(1);
    let far = scratch + FAR;
    for (let at = places; at < end; at += PLACE, far += 16, node += RECORD) {
      const rx = v128.load(at);
      const ry = v128.load(at, 16);
      const rz = v128.load(at, 32);
      const near = v128.load(at, 48);
      addEdge(sum, node + SPANWISE, factor(node + SPANWISE, left, near), rx, ry, rz);
      addEdge(sum, node + STREAMWISE, factor(node + STREAMWISE, v128.load(far), near), rx, ry, rz);
      v128.store(far, near);
      left = near;
    }
    closeRow(scratch, sum);
  }
}

/**
 * Adds the velocity of a packed lattice at n points (n even) to out. `points` holds x, y, z and `out` holds u, v, w, each
 * in three stretches of `stride` bytes; `scratch` has 144 bytes and five vectors a column.
 */
export function induceDouble(
  records: usize,
  rows: i32,
  cols: i32,
  points: usize,
  out: usize,
  stride: usize,
  n: i32,
  scratch: usize,
): void {
  const end = scratch + FAR + <usize>cols * 16;
  const last = records + <usize>(rows * cols) * RECORD;
  for (let p: usize = 0; p < <usize>n * 8; p += 16) {
    memory.fill(scratch, 0, FAR);
    v128.store(scratch, v128.load(points + p), POINTS);
    v128.store(scratch, v128.load(points + stride + p), POINTS + 16);
    v128.store(scratch, v128.load(points + stride * 2 + p), POINTS + 32);
    for (let at = scratch + FAR; at < end; at += 16) v128.store(at, f64x2.splat(1));
    sweep(records, last, cols, scratch);
    addTo(out + p, scratch);
    addTo(out + stride + p, scratch + 16);
    addTo(out + stride * 2 + p, scratch + 32);
  }
}
