/** Reproducible chance: each name and seed has a stream of its own, so drawing more of one thing moves no other. */
export interface Chance {
  /** in [0, 1) */
  readonly uniform: () => number;
  readonly between: (low: number, high: number) => number;
  readonly logBetween: (low: number, high: number) => number;
  /** standard normal deviate */
  readonly normal: () => number;
  readonly whether: (probability: number) => boolean;
  readonly pick: <T>(from: readonly T[]) => T;
}

/** 32-bit FNV-1a hash of a text. */
function hash(text: string): number {
  let h = 0x811c9dc5;
  for (let i = 0; i < text.length; i++) h = Math.imul(h ^ text.charCodeAt(i), 0x01000193);
  return h >>> 0;
}

/** The stream of a name: mulberry32 for uniform numbers, Box and Muller for normal ones. */
export function chanceOf(name: string): Chance {
  let state = hash(name);
  const uniform = () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
  const between = (low: number, high: number) => low + (high - low) * uniform();
  return {
    uniform,
    between,
    logBetween: (low, high) => low * (high / low) ** uniform(),
    normal: () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
    whether: (probability) => uniform() < probability,
    pick: (from) => from[Math.floor(uniform() * from.length)]!,
  };
}
