import { describe, expect, it } from "vitest";
import { judgeHistory } from "../../../checks/index.ts";
import { addDoubts } from "../../../workers/add-doubts.ts";
import { loadDoubts } from "../../../workers/model/index.ts";

const steady = (value: number) => ({
  times: Float64Array.from({ length: 400 }, (_, i) => i),
  channels: { "rotor1.CT": new Float64Array(400).fill(value), CN: new Float64Array(400).fill(0.4) },
});

describe("doubts of the solver about its own averages", () => {
  it("warn of a thrust coefficient above 0.7, beside the channel and in a sentence", () => {
    const judged = addDoubts(judgeHistory(steady(0.82)), loadDoubts);
    expect(judged.channels["rotor1.CT"]!.warnings).toContain("thrust-too-high");
    expect(judged.channels.CN!.warnings).not.toContain("thrust-too-high");
    expect(judged.notes.join()).toContain("rotor1.CT of 0.820 is above 0.7");
  });

  it("leave a judgement alone where there is nothing to doubt", () => {
    const judged = judgeHistory(steady(0.5));
    expect(addDoubts(judged, loadDoubts)).toBe(judged);
    expect(addDoubts(judged, undefined)).toBe(judged);
  });
});
