import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { LegClaim, LegCommit } from "../../orchestrator/store/store.ts";
import { steady, testPlan } from "../helpers/test-plan.ts";
import { testStore } from "../helpers/test-store.ts";

const plan = testPlan({
  runs: [
    { label: "one", inputs: steady(1) },
    { label: "two", inputs: steady(2) },
  ],
});
const runId = plan.runs[0]!.runId;

function commitOf(claim: LegClaim, more: Partial<LegCommit> = {}): LegCommit {
  const from = claim.attemptSteps + 1;
  return {
    campaign: claim.campaign,
    runId: claim.run.runId,
    attempt: claim.attempt,
    fence: claim.fence,
    nowMs: 1000,
    outcome: "budget",
    fromStep: claim.attemptSteps,
    seconds: 2,
    computed: {
      history: {
        file: `runs/${claim.run.runId}/${claim.attempt}.${from}`,
        fromStep: from,
        toStep: from + 99,
        bytes: 10,
      },
      checkpoint: { file: `runs/${claim.run.runId}/s${from}`, step: from + 99, bytes: 1, crc: 1 },
      steps: from + 99,
      channels: [],
      periods: [],
      dtSeconds: 0.01,
    },
    ended: null,
    judgedSteps: from + 99,
    steps: from + 99,
    longestSteps: 4000,
    judgement: null,
    next: { kind: "continue" },
    ...more,
  };
}

describe("the store", () => {
  let made: Awaited<ReturnType<typeof testStore>>;
  beforeAll(async () => {
    made = await testStore();
    await made.store.register(plan, 5);
  });
  afterAll(() => made.db.close());
  const claim = async (legs: number, attempt = 1): Promise<LegClaim> => {
    const claimed = await made.store.claim("test", runId, attempt, legs);
    if (claimed === null) throw new Error("the ticket was out of date");
    return claimed;
  };

  it("gives the plan back as it was", async () => {
    const state = await made.store.campaignState("test");
    expect(state.plan).toEqual(plan);
    expect(state).toMatchObject({ standing: "ready", runs: 2, done: 0, createdMs: 5, verdicts: {} });
    expect(state.list.map((run) => [run.label, run.state, run.place])).toEqual([
      ["one", "waiting", 0],
      ["two", "waiting", 1],
    ]);
  });

  it("says which campaigns and runs there are when asked for another", async () => {
    const { store } = made;
    await expect(store.campaignState("tset")).rejects.toMatchObject({
      code: "NOT_FOUND",
      fix: "There are: test.",
    });
    await expect(store.runDetail("zz")).rejects.toMatchObject({ code: "NOT_FOUND" });
    await expect(store.runDetail("")).rejects.toMatchObject({ code: "NOT_FOUND" });
    expect((await store.runDetail(runId.slice(0, 6))).runId).toBe(runId);
  });

  it("lets only the newest claim write, and writes nothing of an older one", async () => {
    const { store, pool } = made;
    const first = await claim(0);
    const second = await claim(0);
    expect(second.fence).toBe(first.fence + 1);
    expect(await store.commit(commitOf(first))).toBe("stale");
    const rows = async (table: string) => (await pool.query(`select * from midwatch.${table}`)).rows.length;
    expect([await rows("histories"), await rows("legs")]).toEqual([0, 0]);
    expect((await store.campaignRun("test", runId)).steps).toBe(0);
    expect(await store.commit(commitOf(second))).toBe("committed");
    expect(await store.commit(commitOf(second, { fromStep: 7 })).catch(() => "refused")).not.toBe(
      "committed",
    );
    expect([await rows("histories"), await rows("legs")]).toEqual([1, 1]);
  });

  it("drops a ticket whose leg was committed already", async () => {
    expect(await made.store.claim("test", runId, 1, 0)).toBeNull();
    expect(await made.store.claim("test", "no such run", 1, 0)).toBeNull();
    const next = await claim(1);
    expect(next.history).toEqual([{ file: `runs/${runId}/1.1`, fromStep: 1, toStep: 100 }]);
    expect(next.checkpoint?.step).toBe(100);
    expect(next.judgedSteps).toBe(100);
  });

  it("goes on with a remedy as another attempt, and keeps what became of the first", async () => {
    const { store } = made;
    const remedy = { name: "smaller noise", cost: "less", set: { noise: 0.01 } };
    const leg = await claim(1);
    const inputs = { ...leg.inputs, noise: 0.01 };
    const next = {
      kind: "next-attempt" as const,
      verdict: "unstable" as const,
      reason: "it grew",
      remedy,
      settings: '{"noise":0.01}',
      inputs,
    };
    expect(await store.commit(commitOf(leg, { next, outcome: "onset" }))).toBe("committed");
    const run = await store.campaignRun("test", runId);
    expect(run).toMatchObject({ attempt: 2, remedy, state: "running", steps: 0, verdict: null });
    expect((await claim(2, 2)).inputs).toEqual(inputs);
    const detail = await store.runDetail(runId);
    expect(detail.attempts.map((a) => a.settings)).toEqual([{}, remedy.set]);
    expect(detail.campaigns[0]!.past).toMatchObject([{ attempt: 1, reason: "it grew", steps: 200 }]);
  });

  it("ends a run once", async () => {
    const { store } = made;
    const leg = await claim(2, 2);
    const next = { kind: "done", verdict: "accepted", reason: "fine", stopCause: "accepted" } as const;
    expect(await store.commit(commitOf(leg, { next }))).toBe("committed");
    expect(await store.claim("test", runId, 2, 3)).toBeNull();
    expect(await store.campaigns()).toMatchObject([{ runs: 2, done: 1, verdicts: { accepted: 1 } }]);
  });

  it("keeps verdicts when the same campaign comes again, and judges anew under other rules", async () => {
    const { store } = made;
    expect(await store.register(plan, 9)).toEqual({ isNew: false, added: 0, rejudged: 0, dropped: 0 });
    expect((await store.campaignRun("test", runId)).verdict).toBe("accepted");
    const stricter = testPlan({ runs: [{ label: "one", inputs: steady(1) }], tolerance: 0.001 });
    expect(await store.register(stricter, 9)).toEqual({ isNew: false, added: 0, rejudged: 1, dropped: 1 });
    expect(await store.campaignRun("test", runId)).toMatchObject({
      state: "waiting",
      attempt: 1,
      verdict: null,
    });
    expect((await store.runDetail(runId)).attempts[0]!.steps).toBe(200);
  });

  it("counts deaths in a row", async () => {
    const { store } = made;
    expect([await store.countDeath("test", runId), await store.countDeath("test", runId)]).toEqual([1, 2]);
  });
});
