import express, { type ErrorRequestHandler, type Express, type RequestHandler } from "express";
import { AppError, CAUTION, ERROR_CODES } from "../../orchestrator/contract/index.ts";
import { handedOut } from "../../orchestrator/exports/handed-out.ts";
import { loadsCsv } from "../../orchestrator/exports/loads-csv.ts";
import type { Answers } from "./answers.ts";
import { bearerToken } from "./bearer-token.ts";
import { errorBody } from "./error-body.ts";
import { historyQuery, loadsQuery, namePath, parsed } from "./requests.ts";
import { sendText } from "./send-text.ts";

/** What the interface needs: who answers, and who may ask. */
export interface AppOptions {
  readonly answers: Answers;
  readonly token: string;
  /** Told about failures that are bugs. */
  readonly onBug: (error: unknown) => void;
}

/** The HTTP interface of a data folder. */
export function createApp(options: AppOptions): Express {
  const app = express();
  app.disable("x-powered-by");
  // Each parameter once, as text: nested objects in a query are an open door that nothing here needs.
  app.set("query parser", "simple");
  app.use(secureHeaders);
  app.get("/healthz", (_request, response) => {
    response.json({ ok: true });
  });
  app.use(bearerToken(options.token));
  // No route takes a body yet; what comes all the same is bounded here.
  app.use(express.json({ limit: "64kb" }));
  addQuestions(app, options.answers);
  addLoads(app, options.answers);
  app.use((request) => {
    throw new AppError("NOT_FOUND", `there is no ${request.method} ${request.path}`, {
      where: request.path,
      fix: "The routes are /api/campaigns, /api/night, /api/loads and /api/runs.",
    });
  });
  app.use(failure(options.onBug));
  return app;
}

function addQuestions(app: Express, answers: Answers): void {
  app.get("/api/campaigns", async (_request, response) => {
    response.json({ campaigns: await answers.campaigns() });
  });
  app.get("/api/night", async (_request, response) => {
    response.json({ night: await answers.liveNight() });
  });
  app.get("/api/campaigns/:name", async (request, response) => {
    response.json(await answers.campaignState(parsed(namePath, request.params, "path").name));
  });
  app.post("/api/campaigns/:name/stop", async (request, response) => {
    await answers.stop(parsed(namePath, request.params, "path").name);
    response.json({ stopped: true });
  });
  app.delete("/api/campaigns/:name", async (request, response) => {
    response.json(await answers.remove(parsed(namePath, request.params, "path").name));
  });
  app.get("/api/runs/:name", async (request, response) => {
    response.json(await answers.runDetail(parsed(namePath, request.params, "path").name));
  });
  app.get("/api/runs/:name/history", async (request, response) => {
    const { name } = parsed(namePath, request.params, "path");
    const query = parsed(historyQuery, request.query, "query");
    const text = await answers.history(name, query);
    await sendText(response, query.format, text);
  });
}

function addLoads(app: Express, answers: Answers): void {
  app.get("/api/loads", async (request, response) => {
    const { campaign, all, format } = parsed(loadsQuery, request.query, "query");
    const loads = handedOut(await answers.loads(campaign), all);
    if (format === "json") response.json({ loads, caution: CAUTION });
    else await sendText(response, format, [loadsCsv(loads)]);
  });
}

const secureHeaders: RequestHandler = (_request, response, next) => {
  response.set({
    "X-Content-Type-Options": "nosniff",
    "Cache-Control": "no-store",
    "Content-Security-Policy": "default-src 'none'; frame-ancestors 'none'",
    "Referrer-Policy": "no-referrer",
  });
  next();
};

function failure(onBug: (error: unknown) => void): ErrorRequestHandler {
  return (error: unknown, _request, response, _next) => {
    const known = knownFailure(error);
    if (known.code === "BUG") onBug(error);
    // Half an answer is out already: cutting the connection is the only way left to say that it is not whole.
    if (response.headersSent) response.destroy();
    else response.status(ERROR_CODES[known.code].http).json(errorBody(known));
  };
}

function knownFailure(error: unknown): AppError {
  if (error instanceof AppError) return error;
  const status = error instanceof Error && "status" in error ? error.status : undefined;
  if (status === 413)
    return new AppError("TOO_LARGE", "the body of the request is too large", { fix: "Send at most 64 kB." });
  if (typeof status === "number" && status >= 400 && status < 500)
    return new AppError("USAGE", `the request cannot be read: ${(error as Error).message}`, {
      fix: "Send valid JSON and a valid path.",
    });
  return new AppError("BUG", "the request failed inside midwatch", {
    fix: "See the output of the process that holds the folder.",
  });
}
