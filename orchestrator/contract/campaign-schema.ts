import { z } from "zod";
import { axisSchema } from "./campaign-axis-schema.ts";
import { changes, name, scalar, text } from "./campaign-fields.ts";
import { acceptSchema, longestFields, onsetSchema, sufficiencySchema } from "./campaign-rules-schema.ts";

// Points of the order and of samples are spread over at most so many axes; one axis can move several fields.
const AXES_MAX = 10;

const condition = z.union(
  [
    scalar,
    z.array(scalar).min(1).max(1000),
    z.strictObject({ from: z.number().optional(), to: z.number().optional() }),
  ],
  { error: "takes a value, a list of values, or a block with from, to or both" },
);

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
      .array(axisSchema)
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
          ...longestFields,
          with_baseline: z.boolean().default(false).describe("Also run the baseline of this case."),
          notes: text.optional(),
        }),
      )
      .max(1000)
      .default([])
      .describe("Cases outside the sweep: the base case with changes."),
    accept: acceptSchema.describe("When the averages of a run are good enough, and how long a run may take."),
    onset: onsetSchema.prefault({}).describe("What is watched for the wake going unstable."),
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
      .union([z.literal("off"), z.literal(false), sufficiencySchema], {
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
