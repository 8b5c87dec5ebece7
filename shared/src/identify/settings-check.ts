import { DEFAULT_SETTINGS, type AnalysisSettings } from './settings.js';

/** What is wrong with a value of the settings, and where it stands. */
export interface SettingsProblem {
  /** JSON pointer within the settings: '/maskedRegions/0/toNm' */
  readonly pointer: string;
  /** continues "The value ..." */
  readonly detail: string;
}

type Check = (value: unknown, pointer: string) => SettingsProblem[];
const fine: SettingsProblem[] = [];
const problem = (pointer: string, detail: string): SettingsProblem[] => [{ pointer, detail }];

const MOST_ENTRIES = 200;
const NM = [1, 1e7] as const;
const FAMILIES = ['stellar', 'interstellar', 'nebular', 'telluric'];
const KINDS = ['dip', 'peak'];

const number =
  (from: number, to: number, unit = ''): Check =>
  (value, pointer) =>
    typeof value === 'number' && value >= from && value <= to
      ? fine
      : problem(pointer, `must be a number from ${from} to ${to}${unit && ` ${unit}`}`);
const oneOf =
  (words: readonly string[]): Check =>
  (value, pointer) =>
    words.includes(value as string) ? fine : problem(pointer, `must be one of ${words.join(', ')}`);
const orNull =
  (check: Check): Check =>
  (value, pointer) =>
    value === null ? fine : check(value, pointer);
const yesOrNo: Check = (value, pointer) => (typeof value === 'boolean' ? fine : problem(pointer, 'must be true or false'));
const species: Check = (value, pointer) =>
  typeof value === 'string' && /^[A-Za-z][A-Za-z0-9+\- ]{0,19}$/.test(value)
    ? fine
    : problem(pointer, 'must name a species, as in "Ca II"');

/** A list of at most 200 entries. */
const listOf =
  (entry: Check): Check =>
  (value, pointer) => {
    if (!Array.isArray(value)) return problem(pointer, 'must be a list');
    if (value.length > MOST_ENTRIES) return problem(pointer, `must not have more than ${MOST_ENTRIES} entries`);
    return value.flatMap((item, i) => entry(item, `${pointer}/${i}`));
  };

/** An object with these fields and no others; `whole` looks at fields together, once each is right by itself. */
const shaped =
  (fields: Record<string, Check>, whole: (value: Record<string, number>, pointer: string) => SettingsProblem[] = () => fine): Check =>
  (value, pointer) => {
    if (typeof value !== 'object' || value === null || Array.isArray(value)) return problem(pointer, 'must be an object');
    const given = value as Record<string, unknown>;
    const strangers = Object.keys(given).filter((key) => !(key in fields));
    const problems = [
      ...strangers.flatMap((key) => problem(`${pointer}/${key}`, 'is not known here')),
      ...Object.entries(fields).flatMap(([key, check]) => check(given[key], `${pointer}/${key}`)),
    ];
    return problems.length ? problems : whole(given as Record<string, number>, pointer);
  };

const rising =
  (from: string, to: string) =>
  (value: Record<string, number>, pointer: string): SettingsProblem[] =>
    value[from]! < value[to]! ? fine : problem(`${pointer}/${to}`, 'must be larger than where it begins');

const nm = number(...NM, 'nm');
const velocity = number(-250_000, 250_000, 'km/s');
const region = { fromNm: nm, toNm: nm };
const place = { kind: oneOf(KINDS), wavelengthNm: nm };

const CHECKS: Record<keyof AnalysisSettings, Check> = {
  falseFeatures: number(0.001, 1000),
  extinctionAv: orNull(number(0, 50, 'mag')),
  extinctionLaw: oneOf(['ccm89', 'odonnell94', 'fitzpatrick99']),
  extinctionRv: number(2, 6),
  localContinuum: yesOrNo,
  temperatureK: orNull(number(1000, 200_000, 'K')),
  temperatureUse: oneOf(['strengths', 'strengths_and_continuum']),
  velocityRangeKmPerS: number(1, 3000, 'km/s'),
  setSystems: listOf(shaped({ family: oneOf(FAMILIES), velocityKmPerS: velocity, toleranceKmPerS: number(0, 3000, 'km/s') })),
  forbiddenSystems: listOf(shaped({ family: oneOf(FAMILIES), fromKmPerS: velocity, toKmPerS: velocity }, rising('fromKmPerS', 'toKmPerS'))),
  onlySpecies: listOf(species),
  withoutSpecies: listOf(species),
  alsoSpecies: listOf(shaped({ species, family: oneOf(FAMILIES) })),
  maskedRegions: listOf(shaped(region, rising('fromNm', 'toNm'))),
  continuumMoves: listOf(shaped({ ...region, factor: number(0.05, 20) }, rising('fromNm', 'toNm'))),
  addedFeatures: listOf(shaped({ ...place, fwhmNm: orNull(number(1e-5, 1e4, 'nm')) })),
  splitFeatures: listOf(shaped(place)),
  removedFeatures: listOf(shaped(place)),
};

/**
 * Everything that is wrong with settings as they come from a request, a recipe or a form; empty when they may be used.
 * Fields may be left out, for they have defaults; unknown ones are refused, since they would be ignored in silence.
 */
export function settingsProblems(given: unknown): SettingsProblem[] {
  if (typeof given !== 'object' || given === null || Array.isArray(given)) return problem('', 'must be an object');
  const problems = Object.entries(given).flatMap(([key, value]) => {
    if (value === undefined) return fine;
    return key in CHECKS ? CHECKS[key as keyof AnalysisSettings](value, `/${key}`) : problem(`/${key}`, 'is no setting');
  });
  return problems.length ? problems : together(given as Partial<AnalysisSettings>);
}

function together({ onlySpecies = [], withoutSpecies = [], setSystems = [], forbiddenSystems = [] }: Partial<AnalysisSettings>) {
  const both = withoutSpecies.findIndex((s) => onlySpecies.includes(s));
  const contradicted = setSystems.findIndex((s) =>
    forbiddenSystems.some((f) => f.family === s.family && s.velocityKmPerS >= f.fromKmPerS && s.velocityKmPerS <= f.toKmPerS),
  );
  return [
    ...(both < 0 ? fine : problem(`/withoutSpecies/${both}`, 'is also among the species that alone are considered')),
    ...(contradicted < 0
      ? fine
      : problem(`/setSystems/${contradicted}/velocityKmPerS`, 'lies in a range that is forbidden to this family')),
  ];
}

/** Whether two values of a setting are the same. */
export const sameSetting = (a: unknown, b: unknown): boolean => JSON.stringify(a) === JSON.stringify(b);

/** Names of the settings in which two differ; against the defaults when only one is given. */
export function changedSettings(a: AnalysisSettings, b: AnalysisSettings = DEFAULT_SETTINGS): (keyof AnalysisSettings)[] {
  return (Object.keys(DEFAULT_SETTINGS) as (keyof AnalysisSettings)[]).filter((key) => !sameSetting(a[key], b[key]));
}
