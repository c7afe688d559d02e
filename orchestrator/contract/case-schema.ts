import { z } from "zod";

const number = (low: number, high: number) => z.number().min(low).max(high);
const whole = (low: number, high: number) => z.int().min(low).max(high);

const airSchema = z
  .strictObject({
    density_kgpm3: number(0.01, 2000).default(1.225).describe("Density of the air, kg/m³."),
    viscosity_m2ps: number(1e-7, 1e-3).default(1.46e-5).describe("Kinematic viscosity, m²/s."),
  })
  .describe("The air.");

const gustSchema = z
  .strictObject({
    peak_mps: number(-50, 50).describe("Largest change of the wind speed, m/s."),
    start_s: number(0, 1e6).describe("Time at which the gust begins, s."),
    duration_s: number(1e-3, 1e6).describe("Length of the gust, s; its shape is one minus cosine."),
  })
  .describe("One uniform gust along the wind, of one-minus-cosine shape.");

const windSchema = z
  .strictObject({
    speed_mps: number(0, 100)
      .default(0)
      .describe("Wind speed at the reference height, m/s; it blows along +x."),
    shear_exponent: number(0, 1)
      .default(0)
      .describe("Exponent of the power law with height; 0 is a uniform wind."),
    reference_height_m: number(0.1, 1e4).default(100).describe("Height at which the wind speed holds, m."),
    centre_height_m: number(0.1, 1e4)
      .default(100)
      .describe("Height of the origin of the flight path above the ground, m; used by the shear only."),
    gust: gustSchema.nullable().default(null),
  })
  .describe("The wind.");

const straightPath = z
  .strictObject({
    kind: z.literal("straight"),
    speed_mps: number(0.1, 150).describe("Flight speed through the ground frame, against +x, m/s."),
  })
  .describe("Straight flight into the wind.");

const circlePath = z
  .strictObject({
    kind: z.literal("circle"),
    radius_m: number(0.1, 1e4).describe("Radius of the circle of the wing's mid span, m."),
    speed_mps: number(0.1, 150).describe("Mean flight speed along the circle, m/s."),
    speed_variation_percent: number(0, 60)
      .default(0)
      .describe("Amplitude of the speed about its mean, % of it; fastest at the bottom of the circle."),
    tilt_deg: number(-60, 60)
      .default(0)
      .describe("Tilt of the circle's axis out of the wind, about the horizontal across it, degrees."),
    start_deg: number(-360, 360)
      .default(0)
      .describe("Place on the circle at the start, degrees from the horizontal, turning upwards."),
    tether_length_m: number(0.2, 1e5)
      .nullable()
      .default(null)
      .describe(
        "Length of the straight tether from a point on the circle's axis upwind; by default so long that it pulls along the axis.",
      ),
  })
  .describe("A circle flown across the wind.");

const tablePath = z
  .strictObject({
    kind: z.literal("table"),
    points: z
      .array(
        z.strictObject({
          time_s: number(0, 1e6),
          x_m: number(-1e5, 1e5),
          y_m: number(-1e5, 1e5),
          z_m: number(-1e5, 1e5),
        }),
      )
      .min(4)
      .max(10_000)
      .describe("Positions of the wing's mid span in time, at least four, times rising from 0."),
    closed: z.boolean().default(false).describe("Whether the path repeats after its last point."),
    normal: z
      .enum(["downwind", "up"])
      .default("downwind")
      .describe("Where the wing's upper side looks: along the wind, or up, square to the path."),
  })
  .describe("A flight path through given positions (cubic in between).");

const wingStation = z.strictObject({
  half_span_fraction: number(0, 1).describe(
    "Place from mid span (0) to the tip (1); places rise from 0 to 1.",
  ),
  chord_m: number(1e-4, 50).describe("Chord there, m; linear in between."),
  twist_deg: number(-30, 30).default(0).describe("Twist there against mid span, nose up positive, degrees."),
  aft_m: number(-100, 100).default(0).describe("Quarter chord there behind the one at mid span, m."),
});

const wingSchema = z
  .strictObject({
    span_m: number(0.01, 200).describe("Span, tip to tip, m."),
    root_chord_m: number(0.001, 50).describe("Chord at mid span, m."),
    tip_chord_m: number(0.001, 50).describe("Chord at the tips, m; linear in between."),
    sweep_deg: number(-60, 60).default(0).describe("Sweep of the quarter-chord line, aft positive, degrees."),
    dihedral_deg: number(-45, 45).default(0).describe("Dihedral of the quarter-chord line, degrees."),
    twist_deg: number(-20, 20)
      .default(0)
      .describe("Twist of the tips against mid span, nose up positive, linear in between, degrees."),
    camber_percent: number(-12, 12)
      .default(0)
      .describe("Largest camber of the thin camber line (two parabolas), % of the chord."),
    camber_position_percent: number(10, 90)
      .default(40)
      .describe("Place of the largest camber behind the leading edge, % of the chord."),
    stations: z
      .array(wingStation)
      .min(2)
      .max(200)
      .nullable()
      .default(null)
      .describe(
        "Planform and twist by table, both halves alike; when given it replaces chords, sweep and twist.",
      ),
    pitch_deg: number(-60, 60)
      .default(0)
      .describe("Pitch of the mid-span chord against the flight direction, nose up positive, degrees."),
    chordwise_panels: whole(1, 32).default(4).describe("Panels along the chord."),
    spanwise_panels: whole(2, 200)
      .default(24)
      .describe("Strips along the whole span; they cluster at the tips and under the rotors."),
    cluster_at_m: z
      .array(
        z.strictObject({
          along_span_m: number(-200, 200).describe("Place along the span, m."),
          radius_m: number(0.001, 100).describe("Half-width of the cluster, m."),
        }),
      )
      .max(16)
      .nullable()
      .default(null)
      .describe(
        "Where strips cluster besides the tips; by default under the rotors. Name it where cases with and without rotors shall have the same strips.",
      ),
  })
  .describe("The wing.");

const polarRow = z.strictObject({
  alpha_deg: number(-180, 180).describe("Angle of attack, degrees."),
  cl: number(-10, 10).describe("Lift coefficient of the section."),
  cd: number(0, 10).describe("Drag coefficient of the section."),
});

const polarSchema = z
  .strictObject({
    lift_slope_per_rad: number(0.1, 10).default(5.7).describe("Slope of cl with angle of attack, 1/rad."),
    zero_lift_deg: number(-20, 20).default(-2).describe("Angle of attack without lift, degrees."),
    cl_max: number(0.05, 5).default(1.3).describe("Cap of cl above the stall."),
    cl_min: number(-5, -0.05).default(-0.9).describe("Cap of cl below the negative stall."),
    cd0: number(0, 1).default(0.012).describe("Drag coefficient at no lift."),
    cd_k: number(0, 1).default(0.01).describe("Growth of the drag coefficient with cl squared."),
    table: z
      .array(polarRow)
      .min(2)
      .max(1000)
      .nullable()
      .default(null)
      .describe("Polar as a table with rising angles; when given it replaces the formula."),
  })
  .describe("Section polar of the blades.");

const stationSchema = z.strictObject({
  radius_fraction: number(0, 1).describe("Place along the blade, radius over tip radius."),
  chord_m: number(1e-4, 20).describe("Chord there, m."),
  pitch_deg: number(-90, 90).describe("Pitch there against the rotor plane, degrees."),
});

const rotorSchema = z
  .strictObject({
    name: z
      .string()
      .min(1)
      .max(40)
      .default("rotor")
      .describe("Name for people; channels count rotors from 1."),
    ahead_m: number(-100, 100).default(0).describe("Hub ahead of the wing's mid-span quarter chord, m."),
    above_m: number(-100, 100).default(0).describe("Hub above it, along the wing's normal, m."),
    along_span_m: number(-200, 200).default(0).describe("Hub along the span from mid span, m."),
    radius_m: number(0.005, 50).describe("Tip radius, m."),
    hub_radius_m: number(0.0005, 20).describe("Radius at which the blades begin, m."),
    blades: whole(1, 8).default(2).describe("Number of blades."),
    operation: z
      .enum(["generating", "propelling"])
      .default("generating")
      .describe("Whether the rotor takes energy out of the flow or puts it in."),
    rotation: z
      .enum(["left-handed", "right-handed"])
      .default("right-handed")
      .describe("Sense of rotation about the flight direction, by the hand rule."),
    tip_speed_ratio: number(0.1, 30)
      .nullable()
      .default(null)
      .describe("Tip speed over the design apparent wind speed; either this or revolutions_per_s."),
    revolutions_per_s: number(0.01, 2000)
      .nullable()
      .default(null)
      .describe("Revolutions per second; either this or tip_speed_ratio."),
    design_tip_speed_ratio: number(0.5, 20)
      .default(3.5)
      .describe("Tip-speed ratio for which chord and pitch are laid out where no stations are given."),
    design_cl: number(0.05, 1.5).default(0.6).describe("Section lift coefficient of that layout."),
    pitch_change_deg: number(-45, 45).default(0).describe("Added to the pitch of every section, degrees."),
    stations: z
      .array(stationSchema)
      .min(2)
      .max(200)
      .nullable()
      .default(null)
      .describe("Chord and pitch along the blade, radii rising; linear in between."),
    sections: whole(3, 60).default(6).describe("Sections along a blade."),
    axis_yaw_deg: number(-60, 60)
      .default(0)
      .describe("Axis turned from the design apparent wind about the wing's normal, degrees."),
    axis_pitch_deg: number(-60, 60)
      .default(0)
      .describe("Axis turned from the design apparent wind about the span, nose up positive, degrees."),
    phase_deg: number(-360, 360).default(0).describe("Azimuth of the first blade at the start, degrees."),
    polar: polarSchema.prefault({}),
  })
  .describe("A rotor.");

const coresSchema = z
  .strictObject({
    rotor_core_radii: number(1e-4, 1)
      .default(0.1)
      .describe("Core radius of new rotor-wake filaments, in rotor radii."),
    wing_core_chords: number(1e-4, 1)
      .default(0.1)
      .describe("Core radius of new wing-wake filaments, in mean chords."),
    surface_core_chords: number(1e-4, 1)
      .default(0.25)
      .describe(
        "Core radius with which the bound lattice of the wing acts on wakes and rotors, in mean chords.",
      ),
    growth: z.boolean().default(true).describe("Whether cores grow with age."),
    growth_a1: number(0, 1).default(2e-4).describe("Turbulent part of the growth, in units of circulation."),
    strain: z.boolean().default(true).describe("Whether cores thin as their filaments stretch."),
  })
  .describe("Vortex cores.");

const numericsSchema = z
  .strictObject({
    step_deg: number(1, 45)
      .default(20)
      .describe("Azimuth of the clock rotor that one time step covers, degrees."),
    clock_revolutions_per_s: number(0.01, 2000)
      .nullable()
      .default(null)
      .describe(
        "Revolutions per second of the clock that sets the time step and counts revolutions. By default the first rotor's; a wing without rotors takes the time step from wing_step_chords.",
      ),
    wing_step_chords: number(0.02, 5)
      .default(0.5)
      .describe(
        "Without rotors and clock: way flown in one step, in mean chords; 18 steps count as a revolution.",
      ),
    wing_wake_spans: number(0.25, 60).default(1).describe("Length kept of the wing's wake, in spans."),
    rotor_wake_rows: whole(6, 2000).default(75).describe("Rows kept of each blade's wake, one a step."),
    wing_row_every: whole(1, 20).default(1).describe("Steps between rows of the wing's wake."),
    truncate_every: whole(1, 100)
      .default(7)
      .describe("Steps between cuts of the wakes; no divisor of the blade-passing period."),
    relaxation: number(0.05, 1)
      .default(0.8)
      .describe("Relaxation of the rotor circulations in the passes of a step."),
    cores: coresSchema.prefault({}),
  })
  .describe("Numerical settings.");

/** Zod schema of one complete set of inputs of the built-in model. */
export const caseSchema = z
  .strictObject({
    air: airSchema.prefault({}),
    wind: windSchema.prefault({}),
    path: z.discriminatedUnion("kind", [straightPath, circlePath, tablePath]).describe("The flight path."),
    wing: wingSchema,
    rotors: z.array(rotorSchema).max(16).default([]).describe("The rotors; an empty list is the wing alone."),
    numerics: numericsSchema.prefault({}),
  })
  .describe("One complete set of inputs of the built-in model.");

/** One complete set of inputs of the built-in model, defaults filled in. */
export type Case = z.output<typeof caseSchema>;
/** One rotor of a case. */
export type RotorInputs = Case["rotors"][number];
