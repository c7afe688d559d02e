/** A stream of random numbers that a seed determines. */
export interface RandomStream {
  uniform(): number;
  normal(): number;
}

/**
 * Seeded stream: mulberry32 for uniform numbers, Box and Muller for normal ones.
 *
 * @param seed any whole number; hashed, so that neighbouring seeds give unrelated streams
 */
export function randomStream(seed: number): RandomStream {
  let a = Math.imul(seed ^ 0x9e3779b9, 0x85ebca6b) | 0;
  let spare: number | null = null;
  const uniform = () => {
    a = (a + 0x6d2b79f5) | 0;
    let t = Math.imul(a ^ (a >>> 15), 1 | a);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
  const normal = () => {
    if (spare !== null) {
      const kept = spare;
      spare = null;
      return kept;
    }
    const radius = Math.sqrt(-2 * Math.log(uniform() || 2 ** -32));
    const angle = 2 * Math.PI * uniform();
    spare = radius * Math.sin(angle);
    return radius * Math.cos(angle);
  };
  for (let i = 0; i < 8; i++) uniform();
  return { uniform, normal };
}
