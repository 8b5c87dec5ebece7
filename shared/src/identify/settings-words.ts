import { changedSettings, sameSetting } from './settings-check.js';
import { DEFAULT_SETTINGS, type AnalysisSettings } from './settings.js';

/** One effect of settings that differ from the defaults, as a sentence; `key` and, in lists, `index` say which value makes it. */
export interface SettingSentence {
  readonly key: keyof AnalysisSettings;
  readonly index: number | null;
  readonly sentence: string;
}

/** Prints a wavelength given in vacuum nm, with its unit; whoever shows it chooses unit and medium. */
export type PrintWavelength = (nm: number) => string;
const inNm: PrintWavelength = (nm) => `${Number(nm.toFixed(3))} nm`;

const LAWS: Record<AnalysisSettings['extinctionLaw'], string> = {
  ccm89: 'Cardelli, Clayton & Mathis 1989',
  odonnell94: "O'Donnell 1994",
  fitzpatrick99: 'Fitzpatrick 1999',
};
const signed = (x: number): string => `${x < 0 ? '−' : '+'}${Number(Math.abs(x).toFixed(2))}`;
const named = (family: string): string =>
  ({ stellar: 'star', interstellar: 'interstellar gas', nebular: 'nebula', telluric: "Earth's air" })[family] ?? family;

/** What the settings change against an analysis left to itself, in the order of the method. */
export function settingsInWords(s: AnalysisSettings, print: PrintWavelength = inNm): SettingSentence[] {
  const out: SettingSentence[] = [];
  const say = (key: keyof AnalysisSettings, sentence: string, index: number | null = null) => out.push({ key, index, sentence });
  const each = <K extends keyof AnalysisSettings>(
    key: K,
    tell: (value: AnalysisSettings[K] extends readonly (infer T)[] ? T : never) => string,
  ) => (s[key] as readonly never[]).forEach((value, i) => say(key, tell(value), i));
  const changed = new Set(changedSettings(s));
  each('maskedRegions', (r) => `${print(r.fromNm)} to ${print(r.toNm)} is masked: no fit uses it and no feature is found there.`);
  if (s.localContinuum) say('localContinuum', 'The continuum is traced locally; no temperature is fitted.');
  if (s.extinctionAv !== null)
    say('extinctionAv', `Dust is set to A_V = ${s.extinctionAv} mag, E(B−V) = ${(s.extinctionAv / s.extinctionRv).toFixed(3)} mag.`);
  if (changed.has('extinctionLaw')) say('extinctionLaw', `Dust dims after ${LAWS[s.extinctionLaw]}.`);
  if (changed.has('extinctionRv')) say('extinctionRv', `R_V is ${s.extinctionRv} instead of ${DEFAULT_SETTINGS.extinctionRv}.`);
  if (s.temperatureK !== null) {
    const use = s.temperatureUse === 'strengths' ? 'line strengths only' : 'line strengths and continuum';
    say('temperatureK', `The temperature is set to ${Math.round(s.temperatureK)} K for ${use}.`);
  }
  each('continuumMoves', (m) => `The continuum from ${print(m.fromNm)} to ${print(m.toNm)} is moved by ${signed((m.factor - 1) * 100)} %.`);
  if (changed.has('falseFeatures'))
    say(
      'falseFeatures',
      `${s.falseFeatures} false features are expected in the whole spectrum instead of ${DEFAULT_SETTINGS.falseFeatures}: ${s.falseFeatures > DEFAULT_SETTINGS.falseFeatures ? 'weaker' : 'only stronger'} ones count.`,
    );
  each('removedFeatures', (f) => `The ${f.kind} at ${print(f.wavelengthNm)} is taken out.`);
  each('splitFeatures', (f) => `The ${f.kind} at ${print(f.wavelengthNm)} is fitted as two.`);
  each(
    'addedFeatures',
    (f) => `A ${f.kind} is fitted at ${print(f.wavelengthNm)}${f.fwhmNm === null ? '' : `, starting ${print(f.fwhmNm)} wide`}.`,
  );
  if (changed.has('velocityRangeKmPerS')) say('velocityRangeKmPerS', `Systems are looked for within ±${s.velocityRangeKmPerS} km/s.`);
  each(
    'setSystems',
    (v) => `A system of the ${named(v.family)} is set at ${signed(v.velocityKmPerS)} ± ${v.toleranceKmPerS} km/s, found or not.`,
  );
  each(
    'forbiddenSystems',
    (f) => `No system of the ${named(f.family)} is allowed from ${signed(f.fromKmPerS)} to ${signed(f.toKmPerS)} km/s.`,
  );
  if (s.onlySpecies.length) say('onlySpecies', `Only these species are considered: ${s.onlySpecies.join(', ')}.`);
  if (s.withoutSpecies.length) say('withoutSpecies', `Left out: ${s.withoutSpecies.join(', ')}.`);
  each('alsoSpecies', (a) => `${a.species} is also considered in the ${named(a.family)}.`);
  return out;
}

/** What one run set that the other did not, and the other way round. */
export function settingsDifference(
  before: AnalysisSettings,
  after: AnalysisSettings,
  print: PrintWavelength = inNm,
): { gone: string[]; fresh: string[] } {
  if (sameSetting(before, after)) return { gone: [], fresh: [] };
  const [a, b] = [before, after].map((s) => settingsInWords(s, print).map(({ sentence }) => sentence)) as [string[], string[]];
  return { gone: a.filter((x) => !b.includes(x)), fresh: b.filter((x) => !a.includes(x)) };
}
