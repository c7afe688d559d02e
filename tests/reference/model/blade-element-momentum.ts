/** Section of a blade for the reference: radius and width, chord, m; pitch, rad. */
interface ReferenceSection {
  readonly r: number;
  readonly dr: number;
  readonly chord: number;
  readonly pitch: number;
}

/** A rotor for the reference. */
export interface ReferenceRotor {
  readonly radius: number;
  readonly hub: number;
  readonly blades: number;
  readonly sections: readonly ReferenceSection[];
  readonly cl: (alpha: number) => number;
  readonly cd: (alpha: number) => number;
  /** 1 turbine, -1 propeller. */
  readonly sense: 1 | -1;
}

/**
 * Blade-element momentum theory with Prandtl's loss at tip and hub, annulus by annulus, solved for the flow angle by
 * bisection of the equation that the axial and the tangential balance leave of it:
 *
 *   sin φ / (1 - s a) = cos φ / (λr (1 + s a')),  a and a' from  k = σ cn / 4F sin²φ,  k' = σ ct / 4F sin φ cos φ
 *
 * A program of its own: it shares nothing with the model under test.
 *
 * @returns thrust and power coefficients on ½ρV²πR² and ½ρV³πR²
 * @see Glauert (1935), Airplane Propellers, in Durand (ed.), Aerodynamic Theory IV; Ning (2014), A simple solution method
 *   for the blade element momentum equations with guaranteed convergence (both from memory)
 */
export function bladeElementMomentum(
  rotor: ReferenceRotor,
  tipSpeedRatio: number,
): { cT: number; cP: number } {
  let thrust = 0;
  let torque = 0;
  for (const section of rotor.sections) {
    const local = (tipSpeedRatio * section.r) / rotor.radius;
    const balance = (phi: number): number => {
      const { axial, swirl } = factors(rotor, section, phi);
      return Math.sin(phi) / axial - Math.cos(phi) / (local * swirl);
    };
    const phi = bisect(balance, 1e-4, Math.PI / 2 - 1e-4);
    const { axial, cn, ct } = factors(rotor, section, phi);
    const speed = axial / Math.sin(phi);
    const push = (rotor.blades * section.chord * speed * speed * section.dr) / (Math.PI * rotor.radius ** 2);
    thrust += push * cn;
    torque += push * ct * section.r;
  }
  return { cT: thrust, cP: (torque * tipSpeedRatio) / rotor.radius };
}

function factors(rotor: ReferenceRotor, { r, chord, pitch }: ReferenceSection, phi: number) {
  const { sense: s, blades, radius, hub } = rotor;
  const sin = Math.sin(phi);
  const cos = Math.cos(phi);
  const alpha = s * (phi - pitch);
  const cn = rotor.cl(alpha) * cos + s * rotor.cd(alpha) * sin;
  const ct = rotor.cl(alpha) * sin - s * rotor.cd(alpha) * cos;
  const loss = (span: number) => (2 / Math.PI) * Math.acos(Math.exp((-blades * span) / (2 * r * sin)));
  const f = Math.max(1e-6, loss(radius - r) * loss(((r - hub) / hub) * r));
  const solidity = (blades * chord) / (2 * Math.PI * r);
  const k = (solidity * cn) / (4 * f * sin * sin);
  const kSwirl = (solidity * ct) / (4 * f * sin * cos);
  // Turbine: a/(1-a) = k, a'/(1+a') = k'. Propeller: a/(1+a) = k, a'/(1-a') = k'.
  return { axial: 1 / (1 + s * k), swirl: 1 / (1 - s * kSwirl), cn, ct };
}

function bisect(f: (x: number) => number, from: number, to: number): number {
  let [low, high] = [from, to];
  const below = f(low) < 0;
  for (let i = 0; i < 100; i++) {
    const middle = (low + high) / 2;
    if (f(middle) < 0 === below) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
