/** Three components of a vector: x, y, z in the ground frame, or forward, along the span, along the normal in the body's. */
export type Vec3 = readonly [number, number, number];

/** a + k b. */
export const addScaled = (a: Vec3, b: Vec3, k: number): Vec3 => [
  a[0] + k * b[0],
  a[1] + k * b[1],
  a[2] + k * b[2],
];

/** k a. */
export const scaled = (a: Vec3, k: number): Vec3 => [k * a[0], k * a[1], k * a[2]];

/** Scalar product. */
export const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];

/** Vector product. */
export const cross = (a: Vec3, b: Vec3): Vec3 => [
  a[1] * b[2] - a[2] * b[1],
  a[2] * b[0] - a[0] * b[2],
  a[0] * b[1] - a[1] * b[0],
];

/** Length. */
export const norm = (a: Vec3): number => Math.sqrt(dot(a, a));

/** The vector of length 1 in the same direction; a zero vector gives NaN. */
export const unit = (a: Vec3): Vec3 => scaled(a, 1 / norm(a));

/** Radians of degrees. */
export const radians = (degrees: number): number => (degrees * Math.PI) / 180;
