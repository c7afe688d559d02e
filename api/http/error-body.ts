import { z } from "zod";
import { AppError, ERROR_CODES, type ErrorCode } from "../../orchestrator/contract/index.ts";

const codes = Object.keys(ERROR_CODES) as [ErrorCode, ...ErrorCode[]];

/** How a failure travels over HTTP. */
export const errorBodySchema = z.object({
  error: z.object({
    code: z.enum(codes),
    what: z.string(),
    where: z.string().nullable(),
    fix: z.string().nullable(),
  }),
});

/** A failure ready to be sent. */
export type ErrorBody = z.infer<typeof errorBodySchema>;

/** Writes a failure down for the other side. */
export function errorBody(error: AppError): ErrorBody {
  const { code, message: what, where = null, fix = null } = error;
  return { error: { code, what, where, fix } };
}

/** The failure as it was on the other side. */
export function errorFromBody(body: ErrorBody): AppError {
  const { code, what, where, fix } = body.error;
  return new AppError(code, what, {
    ...(where === null ? {} : { where }),
    ...(fix === null ? {} : { fix }),
  });
}
