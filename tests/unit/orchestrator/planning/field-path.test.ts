import { describe, expect, it } from "vitest";
import {
  applyChanges,
  matchFieldPath,
  parseFieldPath,
  writeFieldPath,
} from "../../../../orchestrator/planning/field-path.ts";

const CASE = {
  wing: { span_m: 2 },
  rotors: [{ above_m: 0 }, { above_m: 1 }],
  path: { kind: "circle", radius_m: 4 },
};

describe("field paths", () => {
  it("count places in lists from 1, as channel names do", () => {
    expect(parseFieldPath("rotors.1.above_m")).toEqual(["rotors", 0, "above_m"]);
    expect(writeFieldPath(["rotors", 0, "above_m"])).toBe("rotors.1.above_m");
  });

  it("stand for every member of a list with *, and for none of an empty one", () => {
    expect(matchFieldPath(CASE, ["rotors", "*", "above_m"])).toEqual([
      ["rotors", 0, "above_m"],
      ["rotors", 1, "above_m"],
    ]);
    expect(matchFieldPath({ rotors: [] }, ["rotors", "*", "above_m"])).toEqual([]);
  });

  it.each(["", ".", "a..b", "a.__proto__.b", "constructor", "a.b.c.d.e.f.g.h.i.j.k.l.m"])(
    "refuse %j",
    (text) => {
      expect(() => parseFieldPath(text)).toThrow("is no field path");
    },
  );
});

describe("applyChanges", () => {
  it("leaves the inputs themselves as they are", () => {
    const before = structuredClone(CASE);
    const after = applyChanges(CASE, { "rotors.*.above_m": 2, "wing.span_m": 3 });
    expect(CASE).toEqual(before);
    expect(after).toMatchObject({ wing: { span_m: 3 }, rotors: [{ above_m: 2 }, { above_m: 2 }] });
  });

  it("changes only the named fields of a block, replaces lists, and replaces a block of another kind", () => {
    expect(applyChanges(CASE, { path: { radius_m: 9 } }).path).toEqual({ kind: "circle", radius_m: 9 });
    expect(applyChanges(CASE, { rotors: [{ above_m: 5 }] }).rotors).toEqual([{ above_m: 5 }]);
    expect(applyChanges(CASE, { path: { kind: "straight", speed_mps: 3 } }).path).toEqual({
      kind: "straight",
      speed_mps: 3,
    });
  });

  it("makes a block that was left to its defaults", () => {
    expect(applyChanges(CASE, { "numerics.cores.growth": false }).numerics).toEqual({
      cores: { growth: false },
    });
  });

  it("changes nothing where a list is empty, and applies changes in order", () => {
    expect(applyChanges({ rotors: [] }, { "rotors.*.above_m": 2 })).toEqual({ rotors: [] });
    expect(applyChanges(CASE, { rotors: [], "rotors.*.above_m": 2 }).rotors).toEqual([]);
  });
});
