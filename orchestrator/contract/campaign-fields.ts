import { z } from "zod";

/** A name: one line of text. */
export const name = z
  .string()
  .trim()
  .min(1)
  .max(80)
  .regex(/^[^\p{Cc}]*$/u, { error: "takes text of one line" });
/** Free text. */
export const text = z.string().max(10_000);
/** A single value of an axis. */
export const scalar = z.union([z.number(), z.string().max(200), z.boolean()], {
  error: "takes a number, a text, true or false",
});
/** Path of a field of the case. */
export const fieldPath = z
  .string()
  .min(1)
  .max(200)
  .describe(
    "Field of the case, with dots: wing.span_m, rotors.1.above_m (first rotor), rotors.*.above_m (every rotor).",
  );
/** Changes of a case: field paths with new values. */
export const changes = z
  .record(fieldPath, z.unknown())
  .refine((set) => Object.keys(set).length > 0, { error: "takes at least one field with its new value" })
  .describe(
    "Field paths with their new values. A list is replaced as a whole; a block changes only the fields that it names.",
  );
