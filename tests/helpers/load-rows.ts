import type { LoadRow } from "../../orchestrator/night/index.ts";

/** A load of an invented campaign; `over` replaces parts of it. */
export function loadRow(over: Partial<LoadRow> = {}): LoadRow {
  return {
    campaign: "lantern",
    runId: "a1b2c3d4e5f6",
    number: 1,
    label: "tip_speed_ratio 3.5",
    role: "sweep",
    varied: { tip_speed_ratio: 3.5, blades: 3 },
    channel: "CN",
    unit: "1",
    what: "normal force",
    accepted: true,
    verdict: "accepted",
    runVerdict: "accepted",
    reason: "every demanded channel is accepted",
    mean: 0.4516,
    halfWidth: 0.0027,
    plainMean: 0.4515,
    confidence: 0.95,
    tolerance: 0.0045,
    effectiveSamples: 212,
    window: { fromStep: 120, toStep: 720, fromTime: 0.6, toTime: 3.6 },
    warnings: [],
    remedy: null,
    stopCause: "accepted",
    attempt: 1,
    steps: 720,
    uncertainty: { statistical: 0.0027, sufficiency: [] },
    ...over,
  };
}

/** The same run, not accepted: unstable, with numbers that are not to be handed out unasked. */
export function refusedRow(over: Partial<LoadRow> = {}): LoadRow {
  return loadRow({
    number: 2,
    runId: "b1b2c3d4e5f6",
    label: "tip_speed_ratio 4.5, tiny cores",
    varied: { tip_speed_ratio: 4.5, blades: null },
    accepted: false,
    verdict: "unstable",
    runVerdict: "unstable",
    reason: 'unstable from step 310 on ("CN", growing-oscillation), too soon for an average',
    stopCause: "onset",
    ...over,
  });
}
