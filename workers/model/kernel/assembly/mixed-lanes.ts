// Production build of the segment formula: four evaluation points in the four lanes of a vector. Each coordinate is the sum
// of two singles, so that differences keep the accuracy of double; the pair arithmetic and the sum of a row are in single,
// the total of the rows in double. Formula and order of operations are those of typescript-kernel.ts.
//
// Written for the processor: a row's distances come first and its edges after, since square root and division take long and
// would wait for one another; sums and places live in memory, since locals would be spilled to a stack that is not aligned
// for vectors, which made one process in ten two and a half times slower.

/** Bytes a node: in single, x, y, z high parts, then low parts, μ², two edges of six numbers each, and padding. */
const RECORD: usize = 80;
const LOW: usize = 12;
const CORE: usize = 24;
const SPANWISE: usize = 28;
const STREAMWISE: usize = 52;

/**
 * Scratch: totals u, v, w (32 bytes each), points x, y, z (high 16, low 16 each), row sums; then for each
 * column a vector for the distance to the row above, and places.
 */
const POINTS: usize = 96;
const SUMS: usize = 192;
const FAR: usize = 240;

/** Bytes of a place: r and R. */
const PLACE: usize = 64;

/** p - x of one coordinate for four points, from the two parts of each. */
function difference(point: usize, node: usize): v128 {
  const high = f32x4.sub(v128.load(point), v128.load32_splat(node));
  return f32x4.add(high, f32x4.sub(v128.load(point, 16), v128.load32_splat(node, LOW)));
}

/** √(((rx² + ry²) + rz²) + μ²) */
function distance(rx: v128, ry: v128, rz: v128, node: usize): v128 {
  const plane = f32x4.add(f32x4.mul(rx, rx), f32x4.mul(ry, ry));
  return f32x4.sqrt(f32x4.add(f32x4.add(plane, f32x4.mul(rz, rz)), v128.load32_splat(node, CORE)));
}

/** Factor of e×r for the edge at `edge`, whose far end lies at distance `far` and whose near end at `near`. */
function factor(edge: usize, far: v128, near: v128): v128 {
  const s = f32x4.add(far, near);
  const square = f32x4.sub(f32x4.mul(s, s), v128.load32_splat(edge, 12));
  const den = f32x4.pmax(square, v128.load32_splat(edge, 16));
  return f32x4.div(f32x4.mul(v128.load32_splat(edge, 20), s), f32x4.mul(f32x4.mul(far, near), den));
}

/** Adds k (e×r) of one edge to the row's sum. */
function addEdge(sum: usize, edge: usize, k: v128, rx: v128, ry: v128, rz: v128): void {
  const ex = v128.load32_splat(edge);
  const ey = v128.load32_splat(edge, 4);
  const ez = v128.load32_splat(edge, 8);
  const u = f32x4.sub(f32x4.mul(ey, rz), f32x4.mul(ez, ry));
  v128.store(sum, f32x4.add(v128.load(sum), f32x4.mul(k, u)));
  const v = f32x4.sub(f32x4.mul(ez, rx), f32x4.mul(ex, rz));
  v128.store(sum, f32x4.add(v128.load(sum, 16), f32x4.mul(k, v)), 16);
  const w = f32x4.sub(f32x4.mul(ex, ry), f32x4.mul(ey, rx));
  v128.store(sum, f32x4.add(v128.load(sum, 32), f32x4.mul(k, w)), 32);
}

/** Moves a row's sum into the totals: adds three times four singles to doubles, and sets the sum to zero. */
function closeRow(totals: usize, sum: usize): void {
  for (let end = sum + 48; sum < end; sum += 16, totals += 32) {
    const row = v128.load(sum);
    const low = f64x2.promote_low_f32x4(row);
    const high = f64x2.promote_low_f32x4(v128.shuffle<f64>(row, row, 1, 0));
    v128.store(totals, f64x2.add(v128.load(totals), low));
    v128.store(totals, f64x2.add(v128.load(totals, 16), high), 16);
    v128.store(sum, f32x4.splat(0));
  }
}

/** Takes the points from the nodes of a row: for each node, r and R are written to `places`. */
function place(node: usize, places: usize, end: usize, p: usize): void {
  for (; places < end; places += PLACE, node += RECORD) {
    const rx = difference(p, node);
    const ry = difference(p + 32, node + 4);
    const rz = difference(p + 64, node + 8);
    v128.store(places, rx);
    v128.store(places, ry, 16);
    v128.store(places, rz, 32);
    v128.store(places, distance(rx, ry, rz, node), 48);
  }
}

/** Totals of the nodes from `node` to `last` at four points; column 0 has a spanwise edge of zero strength. */
function sweep(node: usize, last: usize, cols: i32, scratch: usize): void {
  const sum = scratch + SUMS;
  const places = scratch + FAR + <usize>cols * 16;
  const end = places + <usize>cols * PLACE;
  while (node < last) {
    place(node, places, end, scratch + POINTS);
    let left = f32x4.splat(1);
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

/** Splits the four doubles at `at` into high and low parts, four singles each, at `to` and `to + 16`. */
function split(at: usize, to: usize): void {
  const first = v128.load(at);
  const second = v128.load(at, 16);
  const a = f32x4.demote_f64x2_zero(first);
  const b = f32x4.demote_f64x2_zero(second);
  v128.store(to, v128.shuffle<f64>(a, b, 0, 2));
  const c = f32x4.demote_f64x2_zero(f64x2.sub(first, f64x2.promote_low_f32x4(a)));
  const d = f32x4.demote_f64x2_zero(f64x2.sub(second, f64x2.promote_low_f32x4(b)));
  v128.store(to, v128.shuffle<f64>(c, d, 0, 2), 16);
}

/** Adds the four doubles at `sums` to the four at `at`. */
function addTotals(at: usize, sums: usize): void {
  v128.store(at, f64x2.add(v128.load(at), v128.load(sums)));
  v128.store(at, f64x2.add(v128.load(at, 16), v128.load(sums, 16)), 16);
}

/**
 * Adds the velocity of a packed lattice at n points (n a multiple of 4) to out. `points` holds x, y, z and `out` holds
 * u, v, w, each in three stretches of `stride` bytes; `scratch` has 240 bytes and five vectors a column.
 */
export function induceMixed(
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
  for (let p: usize = 0; p < <usize>n * 8; p += 32) {
    memory.fill(scratch, 0, FAR);
    split(points + p, scratch + POINTS);
    split(points + stride + p, scratch + POINTS + 32);
    split(points + stride * 2 + p, scratch + POINTS + 64);
    for (let at = scratch + FAR; at < end; at += 16) v128.store(at, f32x4.splat(1));
    sweep(records, last, cols, scratch);
    addTotals(out + p, scratch);
    addTotals(out + stride + p, scratch + 32);
    addTotals(out + stride * 2 + p, scratch + 64);
  }
}
