/**
 * Every error code with what the outside sees of it: exit status of a command, HTTP status of a route, and whether
 * trying again unchanged can help. Append only: scripts rely on the codes.
 *
 * Exit status: 1 the answer is no, 2 wrong use or bad input, 70 our bug, 75 try again later.
 */
export const ERROR_CODES = {
  USAGE: { exit: 2, http: 400, retry: false },
  FILE_NOT_FOUND: { exit: 2, http: 404, retry: false },
  FILE_UNREADABLE: { exit: 2, http: 400, retry: false },
  YAML_SYNTAX: { exit: 2, http: 400, retry: false },
  CAMPAIGN_INVALID: { exit: 2, http: 422, retry: false },
  CAMPAIGN_EMPTY: { exit: 2, http: 422, retry: false },
  CAMPAIGN_TOO_LARGE: { exit: 2, http: 422, retry: false },
  CASE_INVALID: { exit: 2, http: 422, retry: false },
  HISTORY_INVALID: { exit: 2, http: 422, retry: false },
  HISTORY_DAMAGED: { exit: 2, http: 500, retry: false },
  CHECKPOINT_DAMAGED: { exit: 2, http: 500, retry: false },
  NOT_FOUND: { exit: 2, http: 404, retry: false },
  STATE_CONFLICT: { exit: 2, http: 409, retry: false },
  DATA_FOLDER_BUSY: { exit: 2, http: 503, retry: true },
  DISK_FULL: { exit: 2, http: 507, retry: true },
  NON_FINITE: { exit: 1, http: 422, retry: false },
  ATTEMPT_FAILED: { exit: 1, http: 500, retry: false },
  UNAUTHORISED: { exit: 2, http: 401, retry: false },
  TOO_LARGE: { exit: 2, http: 413, retry: false },
  UNAVAILABLE: { exit: 75, http: 503, retry: true },
  BUG: { exit: 70, http: 500, retry: false },
} as const;

/** One of the codes that say what kind of thing went wrong. */
export type ErrorCode = keyof typeof ERROR_CODES;

/** An expected failure: what happened with the value, where it happened, and what to do about it. */
export class AppError extends Error {
  readonly code: ErrorCode;
  readonly where: string | undefined;
  readonly fix: string | undefined;

  constructor(
    code: ErrorCode,
    what: string,
    options: { where?: string; fix?: string; cause?: unknown } = {},
  ) {
    super(what, options.cause === undefined ? undefined : { cause: options.cause });
    this.name = "AppError";
    this.code = code;
    this.where = options.where;
    this.fix = options.fix;
  }
}
