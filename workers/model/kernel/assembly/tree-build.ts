// Builds the binary tree over the index space of a lattice for the walk in tree-walk.ts. A cell is a rectangle of nodes
// with the edges that arrive at them; cells lie in the order of a depth-first walk, a parent before its children.
//
// Moments of a cell about its centre, in double: with a = Γ e / 4π of an edge and x its place from the centre,
//   A = Σ a,  B = Σ a x,  C = Σ a (x x + e e / 12),  S_n = Σ |a| (|x| + |e|/2)^n.

/** Nodes of a leaf at most. */
const LEAF: i32 = 16;

/** Offsets in the draft of a cell, all doubles: centre 3, A 3, B 9, C 18 (xx xy xz yy yz zz for each of a's three). */
const A: usize = 24;
const B: usize = 48;
const C: usize = 120;
/** S_0 to S_3; then Σ |a| μ², least μ², largest μ², radius. */
const S: usize = 264;
const CORE: usize = 296;
const CORE_MIN: usize = 304;
const CORE_MAX: usize = 312;
const RADIUS: usize = 320;
const DRAFT: usize = 328;

const INV_FOUR_PI: f64 = 1 / (4 * Math.PI);
const CIRCULATION_FLOOR: f64 = 1e-20;

let nodes: usize = 0;
let gap: usize = 0;
let spanwise: usize = 0;
let streamwise: usize = 0;
let cols: i32 = 0;
let cells: usize = 0;
let drafts: usize = 0;
let count: i32 = 0;
let rowPitch: f64 = 0;
let columnPitch: f64 = 0;

/** Bytes of a cell for the walk, and where its rectangle and successor stand: see tree-walk.ts. */
const CELL: usize = 256;
const NEXT: usize = 212;
const RECTANGLE: usize = 216;

/** x, y, z or core (field 0 to 3) of a node. */
function at(field: usize, node: i32): f64 {
  return load<f64>(nodes + gap * field + ((<usize>node) << 3));
}

function add(where: usize, value: f64): void {
  store<f64>(where, load<f64>(where) + value);
}

/** Distance of two nodes. */
function span(from: i32, to: i32): f64 {
  let sum: f64 = 0;
  for (let k: usize = 0; k < 3; k++) sum += (at(k, to) - at(k, from)) * (at(k, to) - at(k, from));
  return sqrt(sum);
}

/** |a| of an edge. */
function weight(from: i32, to: i32, gamma: f64): f64 {
  return abs(gamma) < CIRCULATION_FLOOR ? 0 : abs(gamma) * INV_FOUR_PI * span(from, to);
}

/** First pass over a leaf's edges: S_0, the centre times S_0, and what there is to know of its cores. */
function weigh(draft: usize, from: i32, to: i32, gamma: f64): void {
  const size = weight(from, to, gamma);
  add(draft + S, size);
  for (let k: usize = 0; k < 3; k++) add(draft + k * 8, size * 0.5 * (at(k, from) + at(k, to)));
  const square = 0.5 * (at(3, from) * at(3, from) + at(3, to) * at(3, to));
  add(draft + CORE, size * square);
  for (let end = 0; end < 2; end++) {
    const mu = at(3, end === 0 ? from : to);
    store<f64>(draft + CORE_MIN, min(load<f64>(draft + CORE_MIN), mu * mu));
    store<f64>(draft + CORE_MAX, max(load<f64>(draft + CORE_MAX), mu * mu));
  }
}

/** Second pass: the moments about the centre. */
function gather(draft: usize, from: i32, to: i32, gamma: f64): void {
  const size = weight(from, to, gamma);
  const scale = size === 0 ? 0 : gamma * INV_FOUR_PI;
  const length = span(from, to);
  let square: f64 = 0;
  for (let k: usize = 0; k < 3; k++) {
    const x = 0.5 * (at(k, from) + at(k, to)) - load<f64>(draft + k * 8);
    square += x * x;
  }
  const reach = sqrt(square) + 0.5 * length;
  store<f64>(draft + RADIUS, max(load<f64>(draft + RADIUS), reach));
  add(draft + S + 8, size * reach);
  add(draft + S + 16, size * reach * reach);
  add(draft + S + 24, size * reach * reach * reach);
  for (let i: usize = 0; i < 3; i++) {
    const a = scale * (at(i, to) - at(i, from));
    add(draft + A + i * 8, a);
    let c = draft + C + i * 48;
    for (let k: usize = 0; k < 3; k++) {
      const x = 0.5 * (at(k, from) + at(k, to)) - load<f64>(draft + k * 8);
      const e = at(k, to) - at(k, from);
      add(draft + B + i * 24 + k * 8, a * x);
      for (let l: usize = k; l < 3; l++, c += 8) {
        const y = 0.5 * (at(l, from) + at(l, to)) - load<f64>(draft + l * 8);
        add(c, a * (x * y + (e * (at(l, to) - at(l, from))) / 12));
      }
    }
  }
}

function leafPass(draft: usize, r0: i32, r1: i32, c0: i32, c1: i32, second: bool): void {
  for (let r = r0; r < r1; r++) {
    for (let c = c0; c < c1; c++) {
      const node = r * cols + c;
      if (c > 0) {
        const gamma = load<f64>(spanwise + ((<usize>(node - r - 1)) << 3));
        if (second) gather(draft, node - 1, node, gamma);
        else weigh(draft, node - 1, node, gamma);
      }
      if (r > 0) {
        const gamma = load<f64>(streamwise + ((<usize>(node - cols)) << 3));
        if (second) gather(draft, node - cols, node, gamma);
        else weigh(draft, node - cols, node, gamma);
      }
    }
  }
}

/** Turns a weighted sum of places into the centre, or takes `node` where there is no weight. */
function settleCentre(draft: usize, node: i32): void {
  const size = load<f64>(draft + S);
  for (let k: usize = 0; k < 3; k++) {
    store<f64>(draft + k * 8, size > 0 ? load<f64>(draft + k * 8) / size : at(k, node));
  }
}

/** First pass over a child: its share of weight, centre and cores. */
function weighChild(draft: usize, child: usize): void {
  const size = load<f64>(child + S);
  add(draft + S, size);
  for (let k: usize = 0; k < 3; k++) add(draft + k * 8, size * load<f64>(child + k * 8));
  add(draft + CORE, load<f64>(child + CORE));
  store<f64>(draft + CORE_MIN, min(load<f64>(draft + CORE_MIN), load<f64>(child + CORE_MIN)));
  store<f64>(draft + CORE_MAX, max(load<f64>(draft + CORE_MAX), load<f64>(child + CORE_MAX)));
}

/** Second pass: a child's moments, moved to the parent's centre. */
function gatherChild(draft: usize, child: usize): void {
  let square: f64 = 0;
  for (let k: usize = 0; k < 3; k++) {
    const d = load<f64>(child + k * 8) - load<f64>(draft + k * 8);
    square += d * d;
  }
  const d = sqrt(square);
  const s0 = load<f64>(child + S);
  const s1 = load<f64>(child + S, 8);
  const s2 = load<f64>(child + S, 16);
  add(draft + S + 8, s1 + d * s0);
  add(draft + S + 16, s2 + 2 * d * s1 + d * d * s0);
  add(draft + S + 24, load<f64>(child + S, 24) + 3 * d * s2 + 3 * d * d * s1 + d * d * d * s0);
  store<f64>(draft + RADIUS, max(load<f64>(draft + RADIUS), load<f64>(child + RADIUS) + d));
  for (let i: usize = 0; i < 3; i++) {
    const a = load<f64>(child + A + i * 8);
    add(draft + A + i * 8, a);
    let c = C + i * 48;
    for (let k: usize = 0; k < 3; k++) {
      const dk = load<f64>(child + k * 8) - load<f64>(draft + k * 8);
      const bk = load<f64>(child + B + i * 24 + k * 8);
      add(draft + B + i * 24 + k * 8, bk + a * dk);
      for (let l: usize = k; l < 3; l++, c += 8) {
        const dl = load<f64>(child + l * 8) - load<f64>(draft + l * 8);
        const bl = load<f64>(child + B + i * 24 + l * 8);
        add(draft + c, load<f64>(child + c) + bk * dl + bl * dk + a * dk * dl);
      }
    }
  }
}

/** Builds the cell of a rectangle and all below it; returns its number. */
function build(r0: i32, r1: i32, c0: i32, c1: i32): i32 {
  const index = count++;
  const draft = drafts + <usize>index * DRAFT;
  const cell = cells + <usize>index * CELL;
  memory.fill(draft, 0, DRAFT);
  store<f64>(draft + CORE_MIN, Infinity);
  const tall = r1 - r0;
  const wide = c1 - c0;
  const leaf = tall * wide <= LEAF;
  store<i32>(cell + RECTANGLE, r0);
  store<i32>(cell + RECTANGLE + 4, c0);
  store<i32>(cell + RECTANGLE + 8, leaf ? tall : 0);
  store<i32>(cell + RECTANGLE + 12, wide);
  if (leaf) {
    leafPass(draft, r0, r1, c0, c1, false);
    settleCentre(draft, r0 * cols + c0);
    leafPass(draft, r0, r1, c0, c1, true);
  } else {
    const byRow = tall > 1 && (wide === 1 || <f64>tall * rowPitch >= <f64>wide * columnPitch);
    const middle = byRow ? r0 + ((tall + 1) >> 1) : c0 + ((wide + 1) >> 1);
    const first = byRow ? build(r0, middle, c0, c1) : build(r0, r1, c0, middle);
    const second = byRow ? build(middle, r1, c0, c1) : build(r0, r1, middle, c1);
    weighChild(draft, drafts + <usize>first * DRAFT);
    weighChild(draft, drafts + <usize>second * DRAFT);
    settleCentre(draft, r0 * cols + c0);
    gatherChild(draft, drafts + <usize>first * DRAFT);
    gatherChild(draft, drafts + <usize>second * DRAFT);
  }
  store<i32>(cell + NEXT, count);
  return index;
}

/** Fifth root of q >= 1 by Newton's method from above: the fourth root is at most q^(1/20) too large. */
function fifthRoot(q: f64): f64 {
  let y = sqrt(sqrt(q));
  for (let i = 0; i < 12; i++) y = 0.8 * y + (0.2 * q) / (y * y * y * y);
  return y;
}

/** Distance from which the cell's expansion errs by less than `allowed`, m/s. */
function acceptance(draft: usize, allowed: f64): f64 {
  const radius = load<f64>(draft + RADIUS);
  const spread = load<f64>(draft + CORE_MAX) - load<f64>(draft + CORE_MIN);
  const core = sqrt(load<f64>(draft + CORE_MAX));
  let d = max(1.4 * radius, 5 * core);
  const base = d;
  const q = (4 * load<f64>(draft + S, 24)) / (allowed * base * base * base * base * base);
  if (q > 1) d = max(d, base * fifthRoot(q));
  const p = (0.75 * load<f64>(draft + S) * spread) / allowed;
  return max(d, sqrt(sqrt(p)));
}

/** Writes a double as the sum of two singles, 12 bytes apart. */
function split(value: f64, where: usize): void {
  store<f32>(where, <f32>value);
  store<f32>(where, <f32>(value - <f64>(<f32>value)), 12);
}

/** Offset of component (k, l) among xx xy xz yy yz zz. */
function pair(k: usize, l: usize): usize {
  const low = min(k, l);
  return (((low * (5 - low)) >> 1) + max(k, l)) << 3;
}

/** Writes what the walk reads of a cell (see tree-walk.ts), factors of the expansion included. */
function emit(draft: usize, cell: usize, allowed: f64): void {
  const size = load<f64>(draft + S);
  const reach = acceptance(draft, allowed);
  store<f32>(cell, <f32>(size > 0 ? load<f64>(draft + CORE) / size : load<f64>(draft + CORE_MAX)), 24);
  store<f32>(cell, <f32>(reach * reach), 28);
  for (let i: usize = 0; i < 3; i++) {
    const next = (i + 1) % 3;
    const last = (i + 2) % 3;
    split(load<f64>(draft + i * 8), cell + i * 4);
    store<f32>(cell + i * 4, <f32>load<f64>(draft + A + i * 8), 32);
    const turn = load<f64>(draft + B + next * 24 + last * 8) - load<f64>(draft + B + last * 24 + next * 8);
    store<f32>(cell + i * 4, <f32>turn, 44);
    const c = draft + C + i * 48;
    const trace = load<f64>(c + pair(0, 0)) + load<f64>(c + pair(1, 1)) + load<f64>(c + pair(2, 2));
    store<f32>(cell + i * 4, <f32>(1.5 * trace), 56);
    for (let k: usize = 0; k < 3; k++) {
      store<f32>(cell + i * 12 + k * 4, <f32>(3 * load<f64>(draft + B + i * 24 + k * 8)), 68);
      const across =
        load<f64>(draft + C + next * 48 + pair(last, k)) - load<f64>(draft + C + last * 48 + pair(next, k));
      store<f32>(cell + i * 12 + k * 4, <f32>(3 * across), 104);
      for (let l: usize = k; l < 3; l++) {
        const twice = k === l ? 7.5 : 15;
        store<f32>(cell + i * 24 + (pair(k, l) >> 1), <f32>(twice * load<f64>(c + pair(k, l))), 140);
      }
    }
  }
}

/**
 * Builds the tree of a lattice of at least one node. `nodeFields` holds x, y, z and core, one `stride` bytes apart; there
 * is room for 2n/5 + 3 cells and as many drafts of 328 bytes for n nodes. Returns the number of cells.
 */
export function buildTree(
  rows: i32,
  columns: i32,
  nodeFields: usize,
  stride: usize,
  spanwiseEdges: usize,
  streamwiseEdges: usize,
  cellsAt: usize,
  draftsAt: usize,
  allowed: f64,
): i32 {
  cols = columns;
  nodes = nodeFields;
  gap = stride;
  spanwise = spanwiseEdges;
  streamwise = streamwiseEdges;
  cells = cellsAt;
  drafts = draftsAt;
  count = 0;
  rowPitch = 0;
  columnPitch = 0;
  for (let node = 0; node < rows * cols; node++) {
    if (node >= cols) rowPitch += span(node - cols, node) / <f64>((rows - 1) * cols);
    if (node % cols > 0) columnPitch += span(node - 1, node) / <f64>(rows * (cols - 1));
  }
  build(0, rows, 0, cols);
  for (let i = 0; i < count; i++) emit(drafts + <usize>i * DRAFT, cells + <usize>i * CELL, allowed);
  return count;
}
