import { z } from "zod";
import { changes, fieldPath, name, scalar } from "./campaign-fields.ts";

const span = z.strictObject({
  from: z.number().describe("First value."),
  to: z.number().describe("Last value."),
  count: z
    .int()
    .min(2)
    .max(1_000_000)
    .optional()
    .describe(
      "Number of values, both ends included. Needed unless the campaign is filled with space_filling samples.",
    ),
});

/** One axis of a campaign. */
export const axisSchema = z
  .strictObject({
    name: name
      .optional()
      .describe("What the axis is called in tables and plots; by default the field's own name."),
    unit: name.optional().describe("Unit printed after values; by default the one in the field's name."),
    field: fieldPath.optional(),
    fields: z
      .array(fieldPath)
      .min(1)
      .max(50)
      .optional()
      .describe("Several fields that all take the axis's value."),
    values: z.array(scalar).min(1).max(100_000).optional().describe("The values, in order."),
    range: span.optional().describe("Evenly spaced values."),
    log_range: span.optional().describe("Values spaced by a constant factor; both ends above zero."),
    settings: z
      .array(z.strictObject({ name, set: changes }))
      .min(1)
      .max(10_000)
      .optional()
      .describe(
        "Named settings instead of values, each of which moves several fields to values of their own.",
      ),
  })
  .superRefine((given, context) => {
    const complain = (message: string, path: string[] = []) =>
      context.addIssue({ code: "custom", message, path });
    const kinds = (["field", "fields", "settings"] as const).filter((key) => given[key] !== undefined);
    if (kinds.length !== 1) return complain("an axis takes one of field, fields or settings");
    const ways = (["values", "range", "log_range"] as const).filter((key) => given[key] !== undefined);
    if (given.settings !== undefined) {
      if (given.name === undefined) complain("an axis of settings needs a name");
      if (ways.length > 0) complain("an axis of settings takes no values of its own", [ways[0]!]);
    } else if (ways.length !== 1) complain("an axis takes one of values, range or log_range");
  });
