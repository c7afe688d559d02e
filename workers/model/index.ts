// The built-in model: a lifting wing with rotors and a free wake of vortex filaments, marched in time. Pure functions over
// plain arrays, no I/O. Not here: the leg loop and files around it. Read state/march.ts first: one time step, in order.
//   path/ flight paths · wing/ lifting surface · rotor/ lifting lines · wake/ free wakes · circulations/ how they fit together
//   loads/ forces · record/ channels · state/ marching and checkpoints · describe/ what a case says before it is run
export { describeCase } from "./describe/describe-case.ts";
export { loadDoubts } from "./describe/validity.ts";
export { createSimulation, MODEL_VERSION, restoreSimulation } from "./simulation.ts";
