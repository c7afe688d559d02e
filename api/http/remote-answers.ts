import { z } from "zod";
import { AppError } from "../../orchestrator/contract/index.ts";
import type { LoadRow } from "../../orchestrator/night/index.ts";
import type { CampaignState, CampaignSummary, RunDetail } from "../../orchestrator/store/rows.ts";
import type { Answers } from "./answers.ts";
import { errorBodySchema, errorFromBody } from "./error-body.ts";
import type { LiveNight } from "./live-night.ts";

const CONNECT_MS = 2_000;
const ANSWER_MS = 60_000;
/** A long history takes a while to pass through. */
const HISTORY_MS = 3_600_000;

/** Where the holder of a data folder listens, and what it wants to see. */
export interface Holder {
  readonly host: string;
  readonly port: number;
  readonly token: string;
}

/** Whether the holder named in server.json still answers. */
export async function answersAt(holder: Holder): Promise<boolean> {
  try {
    const response = await fetch(address(holder, "/healthz"), { signal: AbortSignal.timeout(CONNECT_MS) });
    return response.ok && healthy.safeParse(await response.json()).success;
  } catch {
    // Refused, timed out or no JSON: whoever listens there is not the holder.
    return false;
  }
}

/** The answers of another process that holds the data folder. */
export function remoteAnswers(holder: Holder): Answers {
  const get = (path: string) => ask(holder, "GET", path);
  const json = async <T>(path: string, schema: z.ZodType<T>): Promise<T> =>
    checked(await get(path), schema, path);
  return {
    campaigns: async () => (await json("/api/campaigns", campaignsSchema)).campaigns,
    campaignState: (campaign) =>
      json(`/api/campaigns/${encodeURIComponent(campaign)}`, objectOf<CampaignState>("list")),
    liveNight: async () => (await json("/api/night", nightSchema)).night,
    loads: async (campaign) => {
      const query = new URLSearchParams({ all: "true", ...(campaign === null ? {} : { campaign }) });
      return (await json(`/api/loads?${query}`, loadsSchema)).loads;
    },
    runDetail: (runId) => json(`/api/runs/${encodeURIComponent(runId)}`, objectOf<RunDetail>("attempts")),
    history: async (runId, { attempt, channel, format }) => {
      const query = new URLSearchParams({ format });
      if (attempt !== null) query.set("attempt", String(attempt));
      for (const name of channel) query.append("channel", name);
      const path = `/api/runs/${encodeURIComponent(runId)}/history?${query}`;
      return textOf(await ask(holder, "GET", path, HISTORY_MS));
    },
    stop: async (campaign) => {
      await ask(holder, "POST", `/api/campaigns/${encodeURIComponent(campaign)}/stop`);
    },
    remove: async (campaign) => {
      const path = `/api/campaigns/${encodeURIComponent(campaign)}`;
      return checked(await ask(holder, "DELETE", path), removalSchema, path);
    },
    close: async () => {},
  };
}

const healthy = z.object({ ok: z.literal(true) });
// The holder is the same program, most often the same version: what arrives is checked for being the thing asked for.
const objectOf = <T>(key: string): z.ZodType<T> =>
  z.custom<T>((value) => typeof value === "object" && value !== null && key in value);
const campaignsSchema = z.object({ campaigns: z.array(objectOf<CampaignSummary>("standing")) });
const nightSchema = z.object({ night: objectOf<LiveNight>("workers").nullable() });
const removalSchema = z.object({ runsDeleted: z.int(), runsKept: z.int() });
const loadsSchema = z.object({ loads: z.array(objectOf<LoadRow>("runVerdict")) });

async function ask(
  holder: Holder,
  method: "GET" | "POST" | "DELETE",
  path: string,
  timeoutMs = ANSWER_MS,
): Promise<Response> {
  const response = await fetch(address(holder, path), {
    method,
    headers: { Authorization: `Bearer ${holder.token}` },
    signal: AbortSignal.timeout(timeoutMs),
  }).catch((error: unknown) => {
    throw new AppError("UNAVAILABLE", "the process that holds the data folder does not answer", {
      where: `${holder.host}:${holder.port}`,
      fix: "Give the command again; if that does not help, look at the terminal in which it was launched.",
      cause: error,
    });
  });
  if (response.ok) return response;
  const body = errorBodySchema.safeParse(await response.json().catch(() => null));
  if (body.success) throw errorFromBody(body.data);
  throw unexpected(path);
}

async function checked<T>(response: Response, schema: z.ZodType<T>, path: string): Promise<T> {
  const result = schema.safeParse(await response.json().catch(() => null));
  if (result.success) return result.data;
  throw unexpected(path);
}

function unexpected(path: string): AppError {
  return new AppError(
    "UNAVAILABLE",
    "the process that holds the data folder gave an answer that makes no sense",
    {
      where: path,
      fix: "It may be another version of midwatch: end it, and launch again with this one.",
    },
  );
}

async function* textOf(response: Response): AsyncGenerator<string> {
  if (response.body === null) return;
  const decoder = new TextDecoder();
  for await (const bytes of response.body) yield decoder.decode(bytes, { stream: true });
  yield decoder.decode();
}

function address(holder: Holder, path: string): string {
  const host = holder.host.includes(":") ? `[${holder.host}]` : holder.host;
  return `http://${host}:${holder.port}${path}`;
}
