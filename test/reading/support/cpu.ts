/**
 * Seconds of processor time that `work` takes. Not the time on the clock: on a machine shared with others that says how busy
 * they are. Compiling and collecting garbage beside it count too, so it is an upper bound.
 */
export function cpuSeconds<T>(work: () => T): { seconds: number; result: T } {
  const before = process.cpuUsage();
  const result = work();
  const { user, system } = process.cpuUsage(before);
  return { seconds: (user + system) / 1e6, result };
}
