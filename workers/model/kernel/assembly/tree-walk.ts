// Evaluates the tree of a lattice at four points at a time, in single precision with coordinates as in mixed-lanes.ts.
//
// Every lane walks by itself: it takes the expansion of a cell that lies far enough from it and passes over what is below;
// else it goes down, to the segment formula in a leaf. Lanes share the loop, not the decisions, so that a point's bits do
// not depend on its neighbours: what a lane does not take is masked to zero.
//
// Expansion of a cell about its centre to second order, of filaments with the cell's mean μ²; r = p - centre,
// ρ² = r² + μ², A, B and C as in tree-build.ts:
//   w = A + (3 B·r - 3/2 tr C + 15/2 C:rr / ρ²) / ρ²
//   u = (w × r - ε:B - 3 (ε:C)·r / ρ²) / ρ³

/** A cell: centre in two parts (24 bytes), μ², square of the distance from which it holds, then the expansion. */
const CELL: usize = 256;
const REACH: usize = 28;
const NEXT: usize = 212;
const ROW: usize = 216;
const COLUMN: usize = 220;
const TALL: usize = 224;
const WIDE: usize = 228;

/** Node records and scratch of mixed-lanes.ts; the scratch holds a second sum, for leaves, before the columns. */
const RECORD: usize = 80;
const LOW: usize = 12;
const CORE: usize = 24;
const SPANWISE: usize = 28;
const STREAMWISE: usize = 52;
const POINTS: usize = 96;
const SUMS: usize = 192;
const LEAF_SUMS: usize = 240;
const FAR: usize = 288;

/** The number at `where` in all lanes. */
function one(where: usize): v128 {
  return v128.load32_splat(where);
}

/** p - x of one coordinate; as in mixed-lanes.ts, like the next three. */
function difference(point: usize, node: usize): v128 {
  const high = f32x4.sub(v128.load(point), one(node));
  return f32x4.add(high, f32x4.sub(v128.load(point, 16), one(node + LOW)));
}

function square(rx: v128, ry: v128, rz: v128): v128 {
  return f32x4.add(f32x4.add(f32x4.mul(rx, rx), f32x4.mul(ry, ry)), f32x4.mul(rz, rz));
}

function factor(edge: usize, far: v128, near: v128): v128 {
  const s = f32x4.add(far, near);
  const den = f32x4.pmax(f32x4.sub(f32x4.mul(s, s), one(edge + 12)), one(edge + 16));
  return f32x4.div(f32x4.mul(one(edge + 20), s), f32x4.mul(f32x4.mul(far, near), den));
}

/** a·b - c·d */
function minor(a: v128, b: v128, c: v128, d: v128): v128 {
  return f32x4.sub(f32x4.mul(a, b), f32x4.mul(c, d));
}

function addTo(sum: usize, term: v128): void {
  v128.store(sum, f32x4.add(v128.load(sum), term));
}

function addEdge(edge: usize, k: v128, rx: v128, ry: v128, rz: v128, sum: usize): void {
  const ex = one(edge);
  const ey = one(edge + 4);
  const ez = one(edge + 8);
  addTo(sum, f32x4.mul(k, minor(ey, rz, ez, ry)));
  addTo(sum + 16, f32x4.mul(k, minor(ez, rx, ex, rz)));
  addTo(sum + 32, f32x4.mul(k, minor(ex, ry, ey, rx)));
}

/** Distance of the points from a node, in the sense that includes the core. */
function distance(node: usize, points: usize): v128 {
  const rx = difference(points, node);
  const ry = difference(points + 32, node + 4);
  const rz = difference(points + 64, node + 8);
  return f32x4.sqrt(f32x4.add(square(rx, ry, rz), one(node + CORE)));
}

/** Adds what the edges of a leaf induce to the lanes in `mask`. */
function leaf(cell: usize, records: usize, cols: i32, scratch: usize, mask: v128): void {
  const p = scratch + POINTS;
  const sum = scratch + LEAF_SUMS;
  const row = load<i32>(cell, ROW);
  const column = load<i32>(cell, COLUMN);
  const end = scratch + FAR + <usize>load<i32>(cell, WIDE) * 16;
  const stride = <usize>cols * RECORD;
  let start = records + <usize>(row * cols + column) * RECORD;
  const last = start + <usize>load<i32>(cell, TALL) * stride;
  memory.fill(sum, 0, 48);
  let node = start;
  for (let at = scratch + FAR; at < end; at += 16, node += RECORD) {
    v128.store(at, row > 0 ? distance(node - stride, p) : f32x4.splat(1));
  }
  for (; start < last; start += stride) {
    node = start;
    let left = column > 0 ? distance(node - RECORD, p) : f32x4.splat(1);
    for (let at = scratch + FAR; at < end; at += 16, node += RECORD) {
      const rx = difference(p, node);
      const ry = difference(p + 32, node + 4);
      const rz = difference(p + 64, node + 8);
      const near = f32x4.sqrt(f32x4.add(square(rx, ry, rz), one(node + CORE)));
      addEdge(node + SPANWISE, factor(node + SPANWISE, left, near), rx, ry, rz, sum);
      addEdge(node + STREAMWISE, factor(node + STREAMWISE, v128.load(at), near), rx, ry, rz, sum);
      v128.store(at, near);
      left = near;
    }
  }
  for (let k: usize = 0; k < 48; k += 16) {
    addTo(scratch + SUMS + k, v128.and(mask, v128.load(sum + k)));
  }
}

/** Row of a matrix times r. */
function dot(row: usize, rx: v128, ry: v128, rz: v128): v128 {
  return f32x4.add(
    f32x4.add(f32x4.mul(one(row), rx), f32x4.mul(one(row + 4), ry)),
    f32x4.mul(one(row + 8), rz),
  );
}

/** One component of w, from its parts of A, B, tr C and C and the products of r that C meets. */
function strength(cell: usize, i: usize, inv: v128, r: usize, rx: v128, ry: v128, rz: v128): v128 {
  const c = cell + 140 + i * 24;
  const first = f32x4.add(f32x4.mul(one(c), v128.load(r)), f32x4.mul(one(c + 4), v128.load(r, 16)));
  const second = f32x4.add(f32x4.mul(one(c + 8), v128.load(r, 32)), f32x4.mul(one(c + 12), v128.load(r, 48)));
  const third = f32x4.add(f32x4.mul(one(c + 16), v128.load(r, 64)), f32x4.mul(one(c + 20), v128.load(r, 80)));
  const quadratic = f32x4.mul(inv, f32x4.add(f32x4.add(first, second), third));
  const linear = f32x4.sub(dot(cell + 68 + i * 12, rx, ry, rz), one(cell + 56 + i * 4));
  return f32x4.add(one(cell + 32 + i * 4), f32x4.mul(inv, f32x4.add(linear, quadratic)));
}

/** Adds one component of the expansion to the lanes in `mask`. */
function addExpansion(
  cell: usize,
  i: usize,
  sum: usize,
  mask: v128,
  inv: v128,
  h: v128,
  cross: v128,
  across: v128,
): void {
  const value = f32x4.sub(f32x4.sub(cross, one(cell + 44 + i * 4)), f32x4.mul(inv, across));
  addTo(sum + i * 16, v128.and(mask, f32x4.mul(h, value)));
}

/** Adds the expansion of a cell to the lanes in `mask`. */
function expand(cell: usize, scratch: usize, mask: v128, rx: v128, ry: v128, rz: v128, d2: v128): void {
  const inv = f32x4.div(f32x4.splat(1), f32x4.add(d2, one(cell + CORE)));
  const h = f32x4.mul(inv, f32x4.sqrt(inv));
  const r = scratch + LEAF_SUMS;
  v128.store(r, f32x4.mul(rx, rx));
  v128.store(r, f32x4.mul(rx, ry), 16);
  v128.store(r, f32x4.mul(rx, rz), 32);
  v128.store(r, f32x4.mul(ry, ry), 48);
  v128.store(r, f32x4.mul(ry, rz), 64);
  v128.store(r, f32x4.mul(rz, rz), 80);
  const wx = strength(cell, 0, inv, r, rx, ry, rz);
  const wy = strength(cell, 1, inv, r, rx, ry, rz);
  const wz = strength(cell, 2, inv, r, rx, ry, rz);
  const sum = scratch + SUMS;
  addExpansion(cell, 0, sum, mask, inv, h, minor(wy, rz, wz, ry), dot(cell + 104, rx, ry, rz));
  addExpansion(cell, 1, sum, mask, inv, h, minor(wz, rx, wx, rz), dot(cell + 116, rx, ry, rz));
  addExpansion(cell, 2, sum, mask, inv, h, minor(wx, ry, wy, rx), dot(cell + 128, rx, ry, rz));
}

/** Walks the tree for the four points in scratch; their sums are left there. */
function walk(cells: usize, count: i32, records: usize, cols: i32, scratch: usize): void {
  const p = scratch + POINTS;
  let skip = i32x4.splat(0);
  let i = 0;
  while (i < count) {
    const cell = cells + <usize>i * CELL;
    const active = i32x4.le_s(skip, i32x4.splat(i));
    const rx = difference(p, cell);
    const ry = difference(p + 32, cell + 4);
    const rz = difference(p + 64, cell + 8);
    const d2 = square(rx, ry, rz);
    const accept = v128.and(active, f32x4.ge(d2, one(cell + REACH)));
    const next = load<i32>(cell, NEXT);
    if (v128.any_true(accept)) {
      expand(cell, scratch, accept, rx, ry, rz, d2);
      skip = v128.bitselect(i32x4.splat(next), skip, accept);
    }
    const rest = v128.andnot(active, accept);
    if (v128.any_true(rest)) {
      if (load<i32>(cell, TALL) > 0) leaf(cell, records, cols, scratch, rest);
      i++;
    } else {
      i = next;
    }
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

/** Adds four singles to the four doubles at `at`. */
function addTotal(at: usize, sum: usize): void {
  const low = f64x2.promote_low_f32x4(v128.load(sum));
  const high = f64x2.promote_low_f32x4(v128.load64_zero(sum, 8));
  v128.store(at, f64x2.add(v128.load(at), low));
  v128.store(at, f64x2.add(v128.load(at, 16), high), 16);
}

/** Adds the velocity of a lattice with its tree at n points (n a multiple of 4) to out; layout as in induceMixed. */
export function induceTree(
  records: usize,
  cells: usize,
  count: i32,
  cols: i32,
  points: usize,
  out: usize,
  stride: usize,
  n: i32,
  scratch: usize,
): void {
  for (let p: usize = 0; p < <usize>n * 8; p += 32) {
    memory.fill(scratch, 0, FAR);
    split(points + p, scratch + POINTS);
    split(points + stride + p, scratch + POINTS + 32);
    split(points + stride * 2 + p, scratch + POINTS + 64);
    walk(cells, count, records, cols, scratch);
    addTotal(out + p, scratch + SUMS);
    addTotal(out + stride + p, scratch + SUMS + 16);
    addTotal(out + stride * 2 + p, scratch + SUMS + 32);
  }
}
