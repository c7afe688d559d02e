import { z } from "zod";

/** Most axes of a campaign; one axis can move several fields. */
export const AXES_MAX = 10;

const name = z
  .string()
  .trim()
  .min(1)
  .max(80)
  .regex(/^[^\p{Cc}]*$/u, { error: "takes text of one line" });
const text = z.string().max(10_000);
const scalar = z.union([z.number(), z.string().max(200), z.boolean()], {
  error: "takes a number, a text, true or false",
});
const fieldPath = z
  .string()
  .min(1)
  .max(200)
  .describe(
    "Field of the case, with dots: wing.span_m, rotors.1.above_m (first rotor), rotors.*.above_m (every rotor).",
  );
const changes = z
  .record(fieldPath, z.unknown())
  .refine((set) => Object.keys(set).length > 0, { error: "takes at least one field with its new value" })
  .describe(
    "Field paths with their new values. A list is replaced as a whole; a block changes only the fields that it names.",
  );

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

const axis = z
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

const condition = z.union(
  [
    scalar,
    z.array(scalar).min(1).max(1000),
    z.strictObject({ from: z.number().optional(), to: z.number().optional() }),
  ],
  { error: "takes a value, a list of values, or a block with from, to or both" },
);

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
const longest = {
  longest_revolutions: positive
    .optional()
    .describe("A run stops here at the latest, in revolutions of the first rotor."),
  longest_steps: z.int().positive().max(1e9).optional().describe("The same in time steps."),
  longest_s: positive.optional().describe("The same in seconds of flight."),
};

const accept = z
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
    ...longest,
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

const onset = z.strictObject({
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

const sufficiency = z.strictObject({
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

const DEADLINE = /^\s*(([01]?\d|2[0-3]):[0-5]\d|(\d+(\.\d+)?\s*(h|min|s)\s*)+)\s*$/;

/** One zod schema of a campaign file; the base case inside it is held against the solver's own schema. */
export const campaignSchema = z
  .strictObject({
    campaign: name
      .refine((given) => /[a-z0-9]/i.test(given.normalize("NFKD").slice(0, 60)), {
        error: "takes a name with a letter from a to z or a digit near its beginning",
      })
      .describe("Name of the campaign."),
    notes: text.default("").describe("Anything worth remembering; goes into the report."),
    solver: name
      .default("built-in")
      .describe("Solver that computes the runs; built-in is midwatch's own model."),
    case: z
      .record(z.string(), z.unknown())
      .describe("The base case; axes, variants and single cases change it."),
    axes: z
      .array(axis)
      .max(AXES_MAX)
      .default([])
      .describe("What is varied. Without axes the base case is the only run."),
    combine: z
      .union(
        [
          z.enum(["every combination", "paired"]),
          z.strictObject({ space_filling: z.int().min(1).max(10_000_000).describe("Number of samples.") }),
        ],
        { error: "takes every combination, paired, or a block like { space_filling: 24 }" },
      )
      .default("every combination")
      .describe(
        "How axes are combined. space_filling takes points of Sobol's sequence, the same every time.",
      ),
    leave_out: z
      .array(
        z.strictObject({
          when: z
            .record(z.string().min(1).max(200), condition)
            .refine((when) => Object.keys(when).length > 0, { error: "takes at least one axis" })
            .describe("Axis names with the values (or range of values) to leave out; all have to hold."),
          because: text.optional().describe("Why, for the record."),
        }),
      )
      .max(1000)
      .default([])
      .describe("Combinations that are not run."),
    variants: z
      .array(z.strictObject({ name, set: changes, notes: text.optional() }))
      .max(20)
      .default([])
      .describe("Named changes; every run of the sweep is also computed with each of them."),
    baseline: name
      .optional()
      .describe(
        "Variant that runs are compared with: the baseline of a run is that run with the variant's changes.",
      ),
    single_cases: z
      .array(
        z.strictObject({
          name,
          set: changes,
          ...longest,
          with_baseline: z.boolean().default(false).describe("Also run the baseline of this case."),
          notes: text.optional(),
        }),
      )
      .max(1000)
      .default([])
      .describe("Cases outside the sweep: the base case with changes."),
    accept: accept.describe("When the averages of a run are good enough, and how long a run may take."),
    onset: onset.prefault({}).describe("What is watched for the wake going unstable."),
    remedies: z
      .array(
        z.strictObject({
          name,
          set: changes,
          cost: text
            .min(1)
            .describe("What the change costs in fidelity; stands beside every load that comes from it."),
        }),
      )
      .max(20)
      .default([])
      .describe("Changes to try, in order, after a run has gone unstable."),
    sufficiency: z
      .union([z.literal("off"), z.literal(false), sufficiency], {
        error: "takes off, or a block with wake_length, step, strips, at, tolerance",
      })
      .prefault({})
      .describe("Companion runs that tell whether wake, time step and strips are enough; off if you say so."),
    deadline: z
      .string({ error: 'takes a clock time like "06:30" or a duration like "8 h", in quotes' })
      .regex(DEADLINE, { error: 'takes a clock time like "06:30" or a duration like "8 h" or "1 h 30 min"' })
      .refine((given) => given.includes(":") || /[1-9]/.test(given), { error: "takes a duration above zero" })
      .optional()
      .describe(
        'End of the night: clock time ("06:30", its next occurrence) or duration from launch ("8 h", "90 min").',
      ),
    workers: z.int().min(1).max(1024).optional().describe("Worker processes; one per core if left out."),
  })
  .describe("A midwatch campaign: one question put to the model.");

/** A campaign file as it was read, defaults filled in. */
export type CampaignFile = z.output<typeof campaignSchema>;

/** One axis as the file gives it. */
export type CampaignAxis = CampaignFile["axes"][number];
