import { AppError, crc32 } from "../../../orchestrator/contract/index.ts";
import type { Wake } from "../wake/wake.ts";
import type { ModelState } from "./model-state.ts";

// Layout, little-endian: "mwstate1", u32 CRC of the case and versions, u32 count of numbers, the numbers as float64,
// u32 CRC of everything before. The numbers: step, passes, the wing's and blades' circulations, the last sample; then each
// wake: rows, heldSteps and, of what is in use, places, rings, velocities, ages and first lengths.

const MAGIC = new TextEncoder().encode("mwstate1");
const HEAD = MAGIC.length + 8;

/** Takes numbers to the state or from it; the same walk writes and reads, so that the two can't differ. */
type Mover = (array: Float64Array, count: number) => void;

/**
 * The whole state as bytes.
 *
 * @param identity what a simulation must have in common with it to go on from it: case, model version, kernel
 */
export function saveState(state: ModelState, sample: Float64Array, identity: string): Uint8Array {
  const parts: Float64Array[] = [];
  const counters = new Float64Array(2 + 2 * state.wakes.length);
  counters.set([state.step, state.passes, ...state.wakes.flatMap((w) => [w.lattice.rows, w.heldSteps])]);
  parts.push(counters);
  walk(state, sample, (array, count) => parts.push(array.subarray(0, count)));
  const count = parts.reduce((sum, part) => sum + part.length, 0);
  const bytes = new Uint8Array(HEAD + 8 * count + 4);
  const view = new DataView(bytes.buffer);
  bytes.set(MAGIC);
  view.setUint32(8, identityCrc(identity), true);
  view.setUint32(12, count, true);
  let at = HEAD;
  for (const part of parts)
    for (let i = 0; i < part.length; i++, at += 8) view.setFloat64(at, part[i]!, true);
  view.setUint32(at, crc32(bytes.subarray(0, at)), true);
  return bytes;
}

/**
 * Fills a fresh state from bytes.
 *
 * @throws CHECKPOINT_DAMAGED where they are none, are damaged, or belong to another case, version or kernel
 */
export function loadState(
  state: ModelState,
  sample: Float64Array,
  bytes: Uint8Array,
  identity: string,
): void {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const begins = bytes.length >= HEAD + 4 && MAGIC.every((byte, i) => bytes[i] === byte);
  if (!begins) throw damaged("it does not begin like a checkpoint of this version of the model");
  const end = bytes.length - 4;
  if (crc32(bytes.subarray(0, end)) !== view.getUint32(end, true)) throw damaged("its check sum is wrong");
  if (view.getUint32(8, true) !== identityCrc(identity)) {
    throw damaged("it belongs to another case, model version or kernel");
  }
  const count = view.getUint32(12, true);
  let at = HEAD;
  const next = (): number => {
    if (at >= end) throw damaged("it is too short");
    at += 8;
    return view.getFloat64(at - 8, true);
  };
  if (HEAD + 8 * count !== end) throw damaged("its length is wrong");
  state.step = next();
  state.passes = next();
  for (const wake of state.wakes) {
    wake.lattice.rows = next();
    wake.heldSteps = next();
    if (!(wake.lattice.rows <= wake.lattice.capacityRows)) throw damaged("a wake in it is too long");
  }
  walk(state, sample, (array, n) => {
    for (let i = 0; i < n; i++) array[i] = next();
  });
  if (at !== end) throw damaged("it is too long");
}

function walk(state: ModelState, sample: Float64Array, move: Mover): void {
  const { wing, problem, wakes } = state;
  for (const array of [wing.circulation, wing.circulationBefore, wing.circulationTwoBefore]) {
    move(array, array.length);
  }
  move(problem.circulation, problem.circulation.length);
  move(sample, sample.length);
  for (const wake of wakes) walkWake(wake, move);
}

function walkWake(wake: Wake, move: Mover): void {
  const { rows, cols, x, y, z } = wake.lattice;
  const rings = Math.max(0, rows - 1);
  const { velocity, before } = wake;
  for (const field of [x, y, z, velocity.u, velocity.v, velocity.w, before.u, before.v, before.w]) {
    move(field, rows * cols);
  }
  move(wake.rings, rings * (cols - 1));
  move(wake.firstLength, rings * cols);
  move(wake.shedAt, rows);
  move(wake.pasts, rows);
}

const identityCrc = (identity: string): number => crc32(new TextEncoder().encode(identity));

const damaged = (what: string): AppError =>
  new AppError("CHECKPOINT_DAMAGED", `a checkpoint can't be used: ${what}`, {
    where: "checkpoint",
    fix: "Remove the run and launch the campaign again: it is computed anew.",
  });
