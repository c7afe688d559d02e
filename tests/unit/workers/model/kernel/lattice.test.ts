import { describe, expect, it } from "vitest";
import { createLattice, dropRows, pushRow } from "../../../../../workers/model/kernel/index.ts";

describe("a lattice", () => {
  it("starts empty, with room for its rows and all edges between them", () => {
    const lattice = createLattice(4, 3);
    expect([lattice.rows, lattice.x.length, lattice.spanwise.length, lattice.streamwise.length]).toEqual([
      0, 12, 8, 9,
    ]);
  });

  it("moves nodes and edges back when a row is pushed, and ties the new row with zero circulation", () => {
    const lattice = createLattice(3, 2);
    for (const mark of [1, 2, 3]) {
      pushRow(lattice);
      lattice.x.fill(mark, 0, 2);
      lattice.core.fill(mark / 10, 0, 2);
      lattice.spanwise[0] = 10 * mark;
      if (lattice.rows > 1) lattice.streamwise.fill(100 * mark, 0, 2);
    }
    expect(Array.from(lattice.x)).toEqual([3, 3, 2, 2, 1, 1]);
    expect(Array.from(lattice.core)).toEqual([0.3, 0.3, 0.2, 0.2, 0.1, 0.1]);
    expect(Array.from(lattice.spanwise)).toEqual([30, 20, 10]);
    expect(Array.from(lattice.streamwise)).toEqual([300, 300, 200, 200]);
    dropRows(lattice, 2);
    pushRow(lattice);
    expect(Array.from(lattice.x)).toEqual([3, 3, 3, 3, 2, 2]);
    expect(Array.from(lattice.spanwise)).toEqual([0, 30, 20]);
    expect(Array.from(lattice.streamwise)).toEqual([0, 0, 300, 300]);
  });

  it("keeps what it has when asked to keep more, and nothing when asked to keep none", () => {
    const lattice = createLattice(3, 1);
    pushRow(lattice);
    dropRows(lattice, 5);
    expect(lattice.rows).toBe(1);
    dropRows(lattice, 0);
    expect(lattice.rows).toBe(0);
  });

  it("refuses a row beyond its capacity and a shape without nodes", () => {
    const lattice = createLattice(1, 2);
    pushRow(lattice);
    expect(() => pushRow(lattice)).toThrow(/full lattice of 1 rows/);
    expect(() => createLattice(0, 2)).toThrow(/0 rows/);
    expect(() => createLattice(2, 1.5)).toThrow(/1.5 columns/);
  });
});
