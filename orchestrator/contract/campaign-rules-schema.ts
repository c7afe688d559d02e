import { z } from "zod";

const TOLERANCE_WORDS = 'takes a number above zero (absolute) or text like "0.5 % of mean"';
const tolerance = z
  .union(
    [
      z.number({ error: TOLERANCE_WORDS }).positive({ error: TOLERANCE_WORDS }),
      z
        .string()
        .regex(/^\s*(?=[\d.]*[1-9])\d{1,9}(\.\d{1,12})?\s*%(\s*of\s+mean)?\s*$/, { error: TOLERANCE_WORDS }),
    ],
    { error: TOLERANCE_WORDS },
  )
  .describe('Largest half-width of the mean: a number (absolute), or text like "0.5 % of mean".');

const positive = z.number().positive().max(1e9);
/** Longest run, in one of three units. */
export const longestFields = {
  longest_revolutions: positive
    .optional()
    .describe("A run stops here at the latest, in revolutions of the first rotor."),
  longest_steps: z.int().positive().max(1e9).optional().describe("The same in time steps."),
  longest_s: positive.optional().describe("The same in seconds of flight."),
};

/** When the averages of a run are good enough. */
export const acceptSchema = z
  .strictObject({
    channels: z
      .record(z.string().min(1).max(80), tolerance)
      .refine((given) => Object.keys(given).length > 0, {
        error: "takes at least one channel with its tolerance",
      })
      .describe("Channels that all have to be accepted, each with its tolerance, as CN: 0.5 % of mean."),
    confidence: z
      .number()
      .min(0.5)
      .max(0.9999)
      .default(0.95)
      .describe("Confidence of the intervals, 0.95 for 95 %."),
    ...longestFields,
    shortest_revolutions: positive
      .optional()
      .describe("Nothing is accepted before, in revolutions of the first rotor."),
    shortest_steps: z.int().positive().max(1e9).optional().describe("The same in time steps."),
    shortest_s: positive.optional().describe("The same in seconds of flight."),
    first_loop_wanted: z
      .boolean()
      .default(false)
      .describe("On a closed path: accept averages from before the wake has come round to the wing again."),
  })
  .superRefine((given, context) => {
    for (const which of ["longest", "shortest"] as const) {
      const keys = (["revolutions", "steps", "s"] as const).map((unit) => `${which}_${unit}` as const);
      const count = keys.filter((key) => given[key] !== undefined).length;
      if (count > 1)
        context.addIssue({ code: "custom", message: `takes one of ${keys.join(", ")}`, path: [] });
      if (which === "longest" && count === 0)
        context.addIssue({ code: "custom", message: `needs one of ${keys.join(", ")}`, path: [] });
    }
  });

/** What is watched for the wake going unstable. */
export const onsetSchema = z.strictObject({
  channels: z
    .union([z.literal("all"), z.array(z.string().min(1).max(80)).min(1).max(500)], {
      error: "takes the word all, or a list of channels",
    })
    .default("all")
    .describe(
      "Channels watched for the wake going unstable; all takes every load and monitor except single strips.",
    ),
  sensitivity: z
    .number()
    .min(0.25)
    .max(4)
    .default(1)
    .describe(
      "Multiplies what the monitors need to see: 1 is the tested setting, below 1 speaks up earlier.",
    ),
  bounds: z
    .record(
      z.string().min(1).max(80),
      z
        .strictObject({ min: z.number().optional(), max: z.number().optional() })
        .refine((b) => b.min !== undefined || b.max !== undefined, { error: "takes min, max or both" })
        .refine((b) => (b.min ?? -Infinity) < (b.max ?? Infinity), { error: "min has to be below max" }),
    )
    .default({})
    .describe("Values beyond which a channel is lost whatever the monitors say."),
});

const companion = (what: string, least: number, most: number, given: "on" | "off") =>
  z
    .union([z.enum(["on", "off"]), z.boolean(), z.number().min(least).max(most)], {
      error: `takes on, off, or a factor from ${least} to ${most}`,
    })
    .default(given)
    .describe(what);

/** Companions that tell whether wake, step and strips are enough. */
export const sufficiencySchema = z.strictObject({
  wake_length: companion("Companions with all wakes this many times as long; on is 1.5.", 0.25, 4, "on"),
  step: companion("Companions with the time step multiplied by this; on is 0.5.", 0.25, 4, "off"),
  strips: companion("Companions with this many times the spanwise strips; on is 1.5.", 0.25, 4, "off"),
  at: z
    .enum(["corners and middle", "middle", "every run"])
    .default("corners and middle")
    .describe("Runs of the sweep that get companions."),
  tolerance: tolerance
    .optional()
    .describe(
      "Largest harmless difference between a run and its companion; by default the channel's own tolerance.",
    ),
});
