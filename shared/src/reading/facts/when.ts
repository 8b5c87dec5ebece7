import { isoOfMjd, mjdOfIso } from '../../frames/index.js';
import { notStated, stated } from '../columns/medium.js';
import { dateOf } from '../dates.js';
import type { ObservingTime, Stated, TimeMark, TimeScale } from '../types.js';
import type { FactSource, Found } from './source.js';

/** When a spectrum was taken. */
export interface When {
  readonly time: Stated<ObservingTime | null>;
  readonly exposureS: Stated<number | null>;
  /** from the start to the end where the file says so, pauses included; null when it does not */
  readonly elapsedS: number | null;
}

/** Keywords of times, those of the middle first, with what they mark (FITS Standard 4.0 section 9.5; TMID of the Spectrum model). */
const DATES: readonly (readonly [string, TimeMark])[] = [
  ['DATE-AVG', 'mid'],
  ['MID-EXPOSURE', 'mid'],
  ['MID-TIME', 'mid'],
  ['DATE-MID', 'mid'],
  ['DATE-BEG', 'start'],
  ['DATE-OBS', 'start'],
  ['OBSERVED', 'unknown'],
  ['OBSERVED-AT', 'unknown'],
  ['OBSERVATION-DATE', 'unknown'],
  ['DATE-TIME', 'unknown'],
];
const MJDS: readonly (readonly [string, TimeMark])[] = [
  ['MJD-AVG', 'mid'],
  ['TMID', 'mid'],
  ['MJD-MID', 'mid'],
  ['MJDMID', 'mid'],
  ['MJD-BEG', 'start'],
  ['MJD-OBS', 'start'],
  // Hubble's files
  ['EXPSTART', 'start'],
  ['MJD', 'unknown'],
];
/** 1900 to 2130: a number outside is no Modified Julian Date. */
const isMjd = (value: number): boolean => value > 15_000 && value < 100_000;

const SCALES: Record<string, TimeScale> = {
  ...{ utc: 'utc', ut: 'utc', gmt: 'utc', z: 'utc', tai: 'tai', iat: 'tai', tt: 'tt', tdt: 'tt', et: 'tt', tcg: 'tt' },
  ...{ tdb: 'tdb', tcb: 'tdb', ut1: 'ut1', gps: 'gps' },
};

export function whenOf(source: FactSource): When {
  const time = timeOf(source);
  return { time, exposureS: exposureOf(source), elapsedS: elapsedOf(source) };
}

function timeOf(source: FactSource): Stated<ObservingTime | null> {
  const system = source.text('TIMESYS', 'TIME-SCALE');
  // FITS Standard 4.0 section 9.2.1: without TIMESYS it is UTC
  const scale = system ? (SCALES[system.value.toLowerCase().replace(/\(.*$/, '')] ?? 'unknown') : 'utc';
  const all = [...datesOf(source, scale), ...mjdsOf(source, scale), ...taiSeconds(source)];
  // one with a time of day says more than a day, the middle more than the start
  const timed = all.filter((one) => one.value.iso.includes('T'));
  const best = timed.find((one) => one.value.marks === 'mid') ?? timed[0] ?? all[0];
  return best ? stated(best.value, best.where) : notStated(null);
}

function datesOf(source: FactSource, scale: TimeScale): Found<ObservingTime>[] {
  return DATES.flatMap(([keyword, marks]) => {
    const found = source.text(keyword);
    const clock = found && source.text('TIME-OBS', 'UTSTART', 'UT', 'UTC');
    const date = found && dateOf(found.value, clock?.value ?? '');
    return date ? [{ value: { iso: date.iso, scale: date.zoned ? 'utc' : scale, marks }, where: found.where }] : [];
  });
}

function mjdsOf(source: FactSource, scale: TimeScale): Found<ObservingTime>[] {
  return MJDS.flatMap(([keyword, marks]) => {
    const found = source.number(keyword);
    const iso = found && isMjd(found.value) ? isoOfMjd(found.value) : null;
    if (!found || iso === null) return [];
    // a whole number under the bare name is the night, not midnight
    const isDay = keyword === 'MJD' && Number.isInteger(found.value);
    return [{ value: { iso: isDay ? iso.slice(0, 10) : iso, scale, marks }, where: found.where }];
  });
}

/** Survey spectra count seconds of TAI from the origin of MJD. */
function taiSeconds(source: FactSource): Found<ObservingTime>[] {
  const found = source.number('TAI-BEG');
  const mjd = (found?.value ?? NaN) / 86_400;
  const iso = isMjd(mjd) ? isoOfMjd(mjd) : null;
  return found && iso !== null ? [{ value: { iso, scale: 'tai', marks: 'start' }, where: found.where }] : [];
}

/** Longest exposure that is believed: a year. */
const LONGEST_S = 3.2e7;
const isDuration = (value: number): boolean => value > 0 && value <= LONGEST_S;

function exposureOf(source: FactSource): Stated<number | null> {
  const keywords = ['EXPTIME', 'EXPOSURE', 'EXPOSURE-TIME', 'TEXPTIME', 'TEXP', 'ITIME'];
  for (const keyword of keywords) {
    const number = source.number(keyword);
    if (number && isDuration(number.value)) return stated(number.value, number.where);
    const text = source.text(keyword);
    const value = text && secondsOf(text.value);
    if (value && isDuration(value)) return stated(value, text.where);
  }
  return notStated(null);
}

const SECONDS: Record<string, number> = { '': 1, s: 1, sec: 1, second: 1, seconds: 1, m: 60, min: 60, minutes: 60, h: 3600, hours: 3600 };

/** '1200', '1200 s', '20 min'. */
function secondsOf(text: string): number | null {
  const match = /^(\d+(?:\.\d*)?)\s*([a-z]*)$/i.exec(text.trim());
  const perUnit = match && SECONDS[match[2]!.toLowerCase()];
  return perUnit ? Number(match[1]) * perUnit : null;
}

function elapsedOf(source: FactSource): number | null {
  const told = source.number('TELAPSE', 'ELAPSED')?.value;
  if (told !== undefined && isDuration(told)) return told;
  const days = [
    between(source.number('MJD-BEG', 'MJD-OBS')?.value, source.number('MJD-END')?.value),
    between(source.number('EXPSTART')?.value, source.number('EXPEND')?.value),
    between(mjdOfText(source, 'DATE-BEG', 'DATE-OBS'), mjdOfText(source, 'DATE-END')),
    between((source.number('TAI-BEG')?.value ?? NaN) / 86_400, (source.number('TAI-END')?.value ?? NaN) / 86_400),
  ].find((one) => one !== null);
  return days !== undefined && isDuration(days * 86_400) ? days * 86_400 : null;
}

function between(start = NaN, end = NaN): number | null {
  return isMjd(start) && isMjd(end) && end > start ? end - start : null;
}

function mjdOfText(source: FactSource, ...keywords: string[]): number | undefined {
  const found = source.text(...keywords);
  const date = found && dateOf(found.value);
  return (date && mjdOfIso(date.iso)) ?? undefined;
}
