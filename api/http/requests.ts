import { z } from "zod";
import { AppError } from "../../orchestrator/contract/index.ts";

const name = z
  .string()
  .min(1)
  .max(200)
  .regex(/^[A-Za-z0-9][A-Za-z0-9._-]*$/, "letters, digits, points, hyphens and underscores only");
const flag = z.enum(["true", "false"]).transform((text) => text === "true");
/** A parameter that may come several times arrives as a text or a list of them. */
const list = z
  .union([z.string().max(200), z.array(z.string().max(200)).max(1000)])
  .transform((x) => [x].flat());

/** Path of a campaign or a run. */
export const namePath = z.strictObject({ name });

/** What may be asked of the loads. */
export const loadsQuery = z.strictObject({
  campaign: name.nullable().default(null),
  all: flag.default(false),
  format: z.enum(["json", "csv"]).default("json"),
});

/** What may be asked of a history. */
export const historyQuery = z.strictObject({
  attempt: z
    .string()
    .regex(/^[1-9]\d{0,8}$/, "a whole number from 1")
    .transform(Number)
    .nullable()
    .default(null),
  channel: list.default([]),
  format: z.enum(["json", "csv"]).default("csv"),
});

/** Checks what came in against its schema; the complaint names the parameter. @throws USAGE */
export function parsed<T>(schema: z.ZodType<T>, input: unknown, part: "path" | "query"): T {
  const result = schema.safeParse(input);
  if (result.success) return result.data;
  const issue = result.error.issues[0];
  const where = [part, ...(issue?.path ?? [])].map(String).join(" ");
  throw new AppError("USAGE", `the request's ${where} is not valid: ${issue?.message ?? "unknown"}`, {
    where,
    fix: "Correct the address.",
  });
}
