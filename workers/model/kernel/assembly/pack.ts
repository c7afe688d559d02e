// This folder is AssemblyScript, compiled to one WebAssembly module by `npm run build:kernel`; it is no part of the
// TypeScript build. It works on imported memory, which wasm-kernel.ts lays out, and allocates nothing. Its files import
// nothing, since this language's imports carry no extension.
//
// Here: a lattice, copied in as it lies, becomes the node records that the lanes read. Same numbers as node-records.ts.

const CIRCULATION_FLOOR: f64 = 1e-20;
const INV_TWO_PI: f64 = 1 / (2 * Math.PI);

/** Number k of the array of doubles at `array`. */
function at(array: usize, k: i32): f64 {
  return load<f64>(array + ((<usize>k) << 3));
}

/** Circulation as a factor of the segment formula. */
function strength(gamma: f64): f64 {
  return abs(gamma) < CIRCULATION_FLOOR ? 0 : gamma * INV_TWO_PI;
}

/** Square of the length of the edge between two nodes in space and core. */
function square(ex: f64, ey: f64, ez: f64, step: f64): f64 {
  return ex * ex + ey * ey + ez * ez + step * step;
}

let x: usize = 0;
let y: usize = 0;
let z: usize = 0;
let core: usize = 0;

function doubleEdge(from: i32, to: i32, gamma: f64, edge: usize): void {
  const ex = at(x, to) - at(x, from);
  const ey = at(y, to) - at(y, from);
  const ez = at(z, to) - at(z, from);
  store<f64>(edge, ex);
  store<f64>(edge, ey, 8);
  store<f64>(edge, ez, 16);
  store<f64>(edge, square(ex, ey, ez, at(core, to) - at(core, from)), 24);
  store<f64>(edge, 4 * at(core, from) * at(core, to), 32);
  store<f64>(edge, strength(gamma), 40);
}

/** Component of an edge as the lanes would form it from the two parts of each coordinate. */
function parted(from: f64, to: f64): f32 {
  const highFrom = <f32>from;
  const highTo = <f32>to;
  return highTo - highFrom + (<f32>(to - <f64>highTo) - <f32>(from - <f64>highFrom));
}

function singleEdge(from: i32, to: i32, gamma: f64, edge: usize): void {
  const ex = parted(at(x, from), at(x, to));
  const ey = parted(at(y, from), at(y, to));
  const ez = parted(at(z, from), at(z, to));
  store<f32>(edge, ex);
  store<f32>(edge, ey, 4);
  store<f32>(edge, ez, 8);
  store<f32>(edge, <f32>square(ex, ey, ez, at(core, to) - at(core, from)), 12);
  store<f32>(edge, <f32>(4 * at(core, from) * at(core, to)), 16);
  store<f32>(edge, <f32>strength(gamma), 20);
}

/** A coordinate as the sum of two singles, high part at `record`, low part 12 bytes on. */
function split(value: f64, record: usize): void {
  const high = <f32>value;
  store<f32>(record, high);
  store<f32>(record, <f32>(value - <f64>high), 12);
}

function noDoubleEdge(edge: usize): void {
  memory.fill(edge, 0, 48);
  store<f64>(edge, 1, 32);
}

function noSingleEdge(edge: usize): void {
  memory.fill(edge, 0, 24);
  store<f32>(edge, 1, 16);
}

/** Where packDouble and packMixed find the nodes: four arrays of doubles, x, y, z and core, one `stride` bytes apart. */
function nodesAt(nodes: usize, stride: usize): void {
  x = nodes;
  y = nodes + stride;
  z = nodes + stride * 2;
  core = nodes + stride * 3;
}

/** Packs a lattice for induceDouble. Returns the first node whose core is not above zero, or -1. */
export function packDouble(
  rows: i32,
  cols: i32,
  nodes: usize,
  stride: usize,
  spanwise: usize,
  streamwise: usize,
  records: usize,
): i32 {
  nodesAt(nodes, stride);
  let record = records;
  for (let r = 0; r < rows; r++) {
    for (let c = 0; c < cols; c++, record += 128) {
      const node = r * cols + c;
      const mu = at(core, node);
      if (!(mu > 0)) return node;
      store<f64>(record, at(x, node));
      store<f64>(record, at(y, node), 8);
      store<f64>(record, at(z, node), 16);
      store<f64>(record, mu * mu, 24);
      if (c === 0) noDoubleEdge(record + 32);
      else doubleEdge(node - 1, node, at(spanwise, node - r - 1), record + 32);
      if (r === 0) noDoubleEdge(record + 80);
      else doubleEdge(node - cols, node, at(streamwise, node - cols), record + 80);
    }
  }
  return -1;
}

/** Packs a lattice for induceMixed. Returns the first node whose core is not above zero, or -1. */
export function packMixed(
  rows: i32,
  cols: i32,
  nodes: usize,
  stride: usize,
  spanwise: usize,
  streamwise: usize,
  records: usize,
): i32 {
  nodesAt(nodes, stride);
  let record = records;
  for (let r = 0; r < rows; r++) {
    for (let c = 0; c < cols; c++, record += 80) {
      const node = r * cols + c;
      const mu = at(core, node);
      if (!(mu > 0)) return node;
      split(at(x, node), record);
      split(at(y, node), record + 4);
      split(at(z, node), record + 8);
      store<f32>(record, <f32>(mu * mu), 24);
      if (c === 0) noSingleEdge(record + 28);
      else singleEdge(node - 1, node, at(spanwise, node - r - 1), record + 28);
      if (r === 0) noSingleEdge(record + 52);
      else singleEdge(node - cols, node, at(streamwise, node - cols), record + 52);
    }
  }
  return -1;
}
