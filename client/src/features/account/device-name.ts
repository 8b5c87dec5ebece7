const BROWSERS: readonly [RegExp, string][] = [
  [/Edg\//, 'Edge'],
  [/OPR\//, 'Opera'],
  [/Firefox\//, 'Firefox'],
  [/Chrom(e|ium)\//, 'Chrome'],
  [/Safari\//, 'Safari'],
];
const SYSTEMS: readonly [RegExp, string][] = [
  [/Android/, 'Android'],
  [/iPhone|iPad/, 'iOS'],
  [/Windows/, 'Windows'],
  [/Mac OS X/, 'macOS'],
  [/Linux/, 'Linux'],
];

const first = (names: readonly [RegExp, string][], agent: string) => names.find(([pattern]) => pattern.test(agent))?.[1];

/** 'Firefox on Linux' of what a browser says of itself; the beginning of it when that is nothing known. */
export function deviceName(agent: string): string {
  const [browser, system] = [first(BROWSERS, agent), first(SYSTEMS, agent)];
  if (browser && system) return `${browser} on ${system}`;
  return agent.slice(0, 60) || 'Unknown device';
}
