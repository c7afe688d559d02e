/** Result of a piece of work and the CPU time that it took, s: unlike the clock, it stands still while others compute. */
export function cpuTimed<T>(work: () => T): { readonly result: T; readonly seconds: number } {
  const before = process.cpuUsage();
  const result = work();
  const { user, system } = process.cpuUsage(before);
  return { result, seconds: (user + system) / 1e6 };
}
