import { createHash, timingSafeEqual } from "node:crypto";
import type { RequestHandler } from "express";
import { AppError } from "../../orchestrator/contract/index.ts";

/** Lets only requests with the token through; the comparison takes the same time wherever the two differ. */
export function bearerToken(token: string): RequestHandler {
  const wanted = digest(token);
  return (request, _response, next) => {
    const given = /^Bearer (\S+)$/i.exec(request.headers.authorization ?? "")?.[1] ?? "";
    if (timingSafeEqual(digest(given), wanted)) return next();
    throw new AppError("UNAUTHORISED", "this request carries no valid token", {
      where: "header Authorization",
      fix: "Send 'Authorization: Bearer TOKEN' with the token from server.json in the data folder.",
    });
  };
}

/** Equal lengths for timingSafeEqual, whatever was sent. */
function digest(text: string): Buffer {
  return createHash("sha256").update(text).digest();
}
