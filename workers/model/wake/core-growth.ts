import { type CoreLaw, edgeLength, type Wake } from "./wake.ts";

/**
 * Smoothing length μ of the kernel over the core radius r_c of a Gaussian vortex, such that a ring of either moves at the
 * same speed: Γ/4πR (ln(8R/μ) - 1) = Γ/4πR (ln(8R/σ) - 0.558) gives μ = 0.643 σ, and r_c = 1.121 σ.
 * (Saffman, Vortex Dynamics, §10.3; constants from memory.)
 */
export const CORE_LENGTH_PER_RADIUS = 0.573;
/** Lamb–Oseen constant: the radius of largest speed grows as √(4 · 1.25643 ν t) (Lamb 1932, Oseen 1912). */
const LAMB_OSEEN = 1.25643;
/** Largest factor by which stretch thins or squeezing thickens a core area; beyond it a filament has lost its meaning. */
const STRAIN_LIMIT = 16;

/**
 * Writes the core length of every node behind row 0.
 *
 *   r_c² = r_c0² + 4 · 1.25643 (ν + a1 |Γ|) age,  μ² = (0.573 r_c)² · L0/L
 *
 * Γ is the larger circulation of the two streamwise edges that meet at the node, L0/L the ratio of their lengths together,
 * when they left the trailing edge and now, kept within 1/16 to 16.
 *
 * @see Bhagwat & Leishman (2002), Generalized viscous vortex model for application to free-vortex wake and aeroacoustic
 *   calculations (from memory)
 */
export function writeCores(wake: Wake, law: CoreLaw, step: number, dtSeconds: number): void {
  const { lattice, shedAt } = wake;
  const { rows, cols, core } = lattice;
  const first = law.radiusM * law.radiusM;
  const unit = CORE_LENGTH_PER_RADIUS * CORE_LENGTH_PER_RADIUS;
  for (let r = 1; r < rows; r++) {
    const rate = law.growth ? 4 * LAMB_OSEEN * (step - shedAt[r]!) * dtSeconds : 0;
    for (let c = 0; c < cols; c++) {
      const i = r * cols + c;
      const ahead = lattice.streamwise[i - cols]!;
      const behind = r < rows - 1 ? lattice.streamwise[i]! : 0;
      const gamma = Math.max(Math.abs(ahead), Math.abs(behind));
      const square = unit * (first + rate * (law.viscosity + law.a1 * gamma));
      core[i] = Math.sqrt(law.strain ? square * strain(wake, r, c) : square);
    }
  }
}

/** Gives row 0 the core of the bound edge that it lies on, so that both cancel where their circulations do. */
export function setFirstCores({ lattice }: Wake, coreLength: number): void {
  lattice.core.fill(coreLength, 0, lattice.cols);
}

function strain({ lattice, firstLength }: Wake, r: number, c: number): number {
  const { rows, cols } = lattice;
  const i = r * cols + c;
  let first = firstLength[i - cols]!;
  let now = edgeLength(lattice, i - cols, i);
  if (r < rows - 1) {
    first += firstLength[i]!;
    now += edgeLength(lattice, i, i + cols);
  }
  return Math.min(STRAIN_LIMIT, Math.max(1 / STRAIN_LIMIT, first / now));
}
