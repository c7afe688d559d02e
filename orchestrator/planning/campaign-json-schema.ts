import { z } from "zod";
import { campaignSchema } from "../contract/campaign-schema.ts";
import { caseCatalogue } from "./check-case.ts";

/**
 * JSON Schema (draft 2020-12) of campaign files, the case of the built-in model included. No field of the case is marked
 * as required: an axis may supply it.
 */
export function campaignJsonSchema(): Record<string, unknown> {
  const schema = z.toJSONSchema(campaignSchema, { io: "input", unrepresentable: "any" }) as {
    properties: Record<string, Record<string, unknown>>;
  };
  const { $schema: _, ...fields } = caseCatalogue.root as Record<string, unknown>;
  const { description } = schema.properties.case ?? {};
  const properties = { ...schema.properties, case: { ...withoutRequired(fields), description } };
  return { ...schema, title: "midwatch campaign", properties };
}

function withoutRequired<T>(node: T): T {
  if (Array.isArray(node)) return node.map(withoutRequired) as T;
  if (typeof node !== "object" || node === null) return node;
  // A list marks JSON Schema's keyword; a block of that name would be a field's own schema.
  const entries = Object.entries(node).filter(([key, value]) => key !== "required" || !Array.isArray(value));
  return Object.fromEntries(entries.map(([key, value]) => [key, withoutRequired(value)])) as T;
}
