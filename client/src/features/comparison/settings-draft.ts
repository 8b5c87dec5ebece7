import type { ComparisonSettings } from '@foreveil/shared';
import { fixed, parseNumber, signed } from '../../lib/number.js';

/** Settings as they are typed, one text to a field. */
export type SettingsDraft = Record<keyof ComparisonSettings, string>;

const plain = (value: number) => String(value);

export const draftOf = (s: ComparisonSettings): SettingsDraft => ({
  offsetAKmPerS: plain(s.offsetAKmPerS),
  offsetBKmPerS: plain(s.offsetBKmPerS),
  extraCloudsKmPerS: s.extraCloudsKmPerS.map(plain).join('; '),
  matchKmPerS: plain(s.matchKmPerS),
  profileRangeKmPerS: plain(s.profileRangeKmPerS),
});

/** What the server takes for each field, km/s. */
const LIMITS: Record<keyof ComparisonSettings, readonly [number, number]> = {
  offsetAKmPerS: [-1000, 1000],
  offsetBKmPerS: [-1000, 1000],
  extraCloudsKmPerS: [-3000, 3000],
  matchKmPerS: [0.05, 50],
  profileRangeKmPerS: [10, 500],
};
const MOST_CLOUDS = 8;

/** A field's numbers, or what is wrong with it. Clouds are set apart by semicolons, since a comma may be a decimal one. */
export function readField(
  name: keyof ComparisonSettings,
  text: string,
): { values: number[]; wrong: null } | { values: null; wrong: string } {
  const many = name === 'extraCloudsKmPerS';
  const words = many ? text.split(';').filter((w) => w.trim() !== '') : [text];
  const values = words.map(parseNumber);
  const [from, to] = LIMITS[name];
  if (values.some((v) => v === null))
    return { values: null, wrong: many ? 'Write numbers with ; between, as in -12.5; 4' : 'Write a number, as in 12.5' };
  if (values.length > MOST_CLOUDS) return { values: null, wrong: `At most ${MOST_CLOUDS} clouds` };
  if (values.some((v) => v! < from || v! > to))
    return { values: null, wrong: `Between ${fixed(from, from % 1 ? 2 : 0)} and ${fixed(to, 0)} km/s` };
  return { values: values as number[], wrong: null };
}

/** The settings typed; null while a field is wrong. */
export function settingsOf(draft: SettingsDraft): ComparisonSettings | null {
  const one = (name: keyof ComparisonSettings) => readField(name, draft[name]).values;
  const [a, b, clouds, match, range] = [
    one('offsetAKmPerS'),
    one('offsetBKmPerS'),
    one('extraCloudsKmPerS'),
    one('matchKmPerS'),
    one('profileRangeKmPerS'),
  ];
  if (!a || !b || !clouds || !match || !range) return null;
  return { offsetAKmPerS: a[0]!, offsetBKmPerS: b[0]!, extraCloudsKmPerS: clouds, matchKmPerS: match[0]!, profileRangeKmPerS: range[0]! };
}

/** What the next run will do otherwise than the one shown, a sentence each. */
export function changesOf(was: ComparisonSettings, is: ComparisonSettings): string[] {
  const shift = (name: 'offsetAKmPerS' | 'offsetBKmPerS', side: string) =>
    was[name] === is[name] ? [] : [`Velocities of ${side} are shifted by ${signed(is[name], 2)} km/s instead of ${signed(was[name], 2)}.`];
  const added = is.extraCloudsKmPerS.filter((v) => !was.extraCloudsKmPerS.includes(v));
  const dropped = was.extraCloudsKmPerS.filter((v) => !is.extraCloudsKmPerS.includes(v));
  return [
    ...shift('offsetAKmPerS', 'A'),
    ...shift('offsetBKmPerS', 'B'),
    ...added.map((v) => `A cloud at ${signed(v, 2)} km/s is measured even if no analysis found it.`),
    ...dropped.map((v) => `A cloud at ${signed(v, 2)} km/s is no longer asked for.`),
    ...(was.matchKmPerS === is.matchKmPerS ? [] : [`Clouds within ${fixed(is.matchKmPerS, 2)} km/s of each other are tried as one.`]),
    ...(was.profileRangeKmPerS === is.profileRangeKmPerS
      ? []
      : [`Profiles reach ${fixed(is.profileRangeKmPerS, 0)} km/s to both sides of the clouds.`]),
  ];
}
