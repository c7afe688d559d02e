import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Answers } from "../../../../api/http/answers.ts";
import { createApp } from "../../../../api/http/app.ts";
import { answersAt, type Holder, remoteAnswers } from "../../../../api/http/remote-answers.ts";
import { type Serving, serveApp } from "../../../../api/http/serve-app.ts";
import { AppError } from "../../../../orchestrator/contract/index.ts";
import { loadRow, refusedRow } from "../../../helpers/load-rows.ts";

const token = "0123456789abcdef0123456789abcdef";
const asked: unknown[] = [];
const bugs: unknown[] = [];

const answers: Answers = {
  campaigns: async () => [],
  campaignState: async (campaign) => {
    if (campaign === "bug") throw new TypeError("made up");
    throw new AppError("NOT_FOUND", `there is no campaign ${campaign}`, {
      where: campaign,
      fix: "Did you mean lantern?",
    });
  },
  liveNight: async () => null,
  loads: async (campaign) => {
    asked.push(campaign);
    return [loadRow(), refusedRow()];
  },
  runDetail: async () => {
    throw new AppError("NOT_FOUND", "no such run");
  },
  history: async (runId, request) => {
    asked.push([runId, request]);
    async function* pieces() {
      yield "t,CN\n";
      for (let i = 0; i < 5000; i++) yield `${i},0.45\n`;
      if (runId === "damaged") throw new AppError("HISTORY_DAMAGED", "made up");
    }
    return pieces();
  },
  stop: async (campaign) => {
    asked.push(["stop", campaign]);
  },
  remove: async (campaign) => {
    asked.push(["remove", campaign]);
    return { runsDeleted: 3, runsKept: 1 };
  },
  close: async () => {},
};

let serving: Serving;
let holder: Holder;
beforeAll(async () => {
  serving = await serveApp(createApp({ answers, token, onBug: (error) => bugs.push(error) }), {
    host: "127.0.0.1",
    port: 0,
  });
  holder = { host: serving.host, port: serving.port, token };
});
afterAll(() => serving.close());

const send = (path: string, init: RequestInit = {}) =>
  fetch(`http://127.0.0.1:${serving.port}${path}`, {
    ...init,
    headers: { Authorization: `Bearer ${token}`, ...init.headers },
  });
const errorOf = async (response: Response) => ({
  status: response.status,
  ...((await response.json()) as object),
});

describe("who may ask", () => {
  it.each(["", "Bearer", "Bearer wrong", `Basic ${token}`, `Bearer ${token}x`])("not %j", async (header) => {
    for (const path of ["/api/loads", "/api/campaigns", "/nowhere"]) {
      const response = await send(path, { headers: { Authorization: header } });
      expect(await errorOf(response)).toMatchObject({ status: 401, error: { code: "UNAUTHORISED" } });
    }
  });

  it("anyone may ask whether it lives, and learns nothing else", async () => {
    const response = await fetch(`http://127.0.0.1:${serving.port}/healthz`);
    expect(await response.json()).toEqual({ ok: true });
    expect(response.headers.get("x-powered-by")).toBeNull();
  });
});

describe("routes", () => {
  it("loads as CSV and JSON, without the numbers of what is not accepted unless asked", async () => {
    const csv = await send("/api/loads?format=csv");
    expect(csv.headers.get("content-type")).toBe("text/csv; charset=utf-8");
    const lines = (await csv.text()).trim().split("\n");
    expect(lines).toHaveLength(3);
    expect(lines[1]).toContain("0.4516");
    expect(lines[2]).not.toContain("0.4516");
    const json = (await (await send("/api/loads?all=true&campaign=lantern")).json()) as { loads: unknown[] };
    expect(json).toMatchObject({
      loads: [{ mean: 0.4516 }, { mean: 0.4516, accepted: false }],
      caution: expect.any(String),
    });
    expect(asked.at(-1)).toBe("lantern");
  });

  it("a history as text, with its parameters", async () => {
    const response = await send("/api/runs/a1b2/history?channel=CN&channel=CL&attempt=2");
    expect((await response.text()).split("\n")).toHaveLength(5002);
    expect(asked.at(-1)).toEqual(["a1b2", { attempt: 2, channel: ["CN", "CL"], format: "csv" }]);
  });

  it("a history that breaks off is not taken for whole", async () => {
    const response = await send("/api/runs/damaged/history");
    await expect(response.text()).rejects.toThrow();
  });

  it.each([
    ["GET", "/api/loads?format=xml", 400, "query format"],
    ["GET", "/api/loads?fromat=csv", 400, "query"],
    ["GET", "/api/loads?campaign=../../etc", 400, "query campaign"],
    ["GET", "/api/runs/a/history?attempt=0", 400, "query attempt"],
    ["GET", "/api/runs/..%2f..%2fetc/history", 400, "path name"],
    ["GET", "/api/runs/%00", 400, "path name"],
    ["GET", "/api/campaigns/none", 404, "none"],
    ["GET", "/nowhere", 404, "/nowhere"],
    ["DELETE", "/api/loads", 404, "/api/loads"],
  ])("%s %s is refused with %i, naming %s", async (method, path, status, where) => {
    const error = await errorOf(await send(path, { method }));
    expect(error).toMatchObject({ status, error: { where, fix: expect.any(String) } });
  });

  it("refuses a path that cannot be decoded, a body that is no JSON and one that is too large", async () => {
    expect(await errorOf(await send("/api/runs/%E0%A4%A"))).toMatchObject({
      status: 400,
      error: { code: "USAGE" },
    });
    const post = (body: string) =>
      send("/api/campaigns/x/stop", {
        method: "POST",
        body,
        headers: { "Content-Type": "application/json" },
      });
    expect(await errorOf(await post("{"))).toMatchObject({ status: 400, error: { code: "USAGE" } });
    expect(await errorOf(await post(JSON.stringify("x".repeat(70_000))))).toMatchObject({
      status: 413,
      error: { code: "TOO_LARGE" },
    });
  });

  it("tells nothing about a bug but that it is one, and hands it to the holder", async () => {
    const error = await errorOf(await send("/api/campaigns/bug"));
    expect(error).toMatchObject({ status: 500, error: { code: "BUG" } });
    expect(JSON.stringify(error)).not.toContain("made up");
    expect(bugs).toEqual([expect.objectContaining({ message: "made up" })]);
  });
});

describe("the other side of it", () => {
  it("gives the same answers as the holder", async () => {
    const remote = remoteAnswers(holder);
    expect(await answersAt(holder)).toBe(true);
    expect(await remote.loads(null)).toEqual(await answers.loads(null));
    expect(await remote.campaigns()).toEqual([]);
    expect(await remote.liveNight()).toBeNull();
    await remote.stop("lantern");
    expect(asked.at(-1)).toEqual(["stop", "lantern"]);
    expect(await remote.remove("lantern")).toEqual({ runsDeleted: 3, runsKept: 1 });
    expect(asked.at(-1)).toEqual(["remove", "lantern"]);
    let text = "";
    for await (const piece of await remote.history("a1b2", { attempt: null, channel: [], format: "csv" }))
      text += piece;
    expect(text.startsWith("t,CN\n0,0.45\n") && text.endsWith("\n4999,0.45\n")).toBe(true);
  });

  it("gives the same failures as the holder", async () => {
    await expect(remoteAnswers(holder).campaignState("lantren")).rejects.toMatchObject({
      code: "NOT_FOUND",
      message: "there is no campaign lantren",
      where: "lantren",
      fix: "Did you mean lantern?",
    });
    await expect(remoteAnswers({ ...holder, token: "old" }).loads(null)).rejects.toMatchObject({
      code: "UNAUTHORISED",
    });
  });

  it("knows a holder that is gone, and says so", async () => {
    const gone = await serveApp(createApp({ answers, token, onBug: () => {} }), {
      host: "127.0.0.1",
      port: 0,
    });
    await gone.close();
    const nobody = { host: gone.host, port: gone.port, token };
    expect(await answersAt(nobody)).toBe(false);
    await expect(remoteAnswers(nobody).campaigns()).rejects.toMatchObject({ code: "UNAVAILABLE" });
  });

  it("refuses a port that is taken", async () => {
    await expect(
      serveApp(createApp({ answers, token, onBug: () => {} }), { host: "127.0.0.1", port: serving.port }),
    ).rejects.toMatchObject({ code: "STATE_CONFLICT", where: `127.0.0.1:${serving.port}` });
  });
});
