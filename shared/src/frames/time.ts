/** Days from the Modified Julian Date's origin, 1858-11-17, to 1970-01-01. */
const MJD_OF_1970 = 40_587;
const MS_PER_DAY = 86_400_000;
const S_PER_DAY = 86_400;

/** First day, UTC, of each value of TAI - UTC in seconds, from 10 on. Source: IERS Bulletin C, from memory. */
const LEAPS: readonly string[] = [
  ...['1972-01-01', '1972-07-01', '1973-01-01', '1974-01-01', '1975-01-01', '1976-01-01', '1977-01-01', '1978-01-01', '1979-01-01'],
  ...['1980-01-01', '1981-07-01', '1982-07-01', '1983-07-01', '1985-07-01', '1988-01-01', '1990-01-01', '1991-01-01', '1992-07-01'],
  ...['1993-07-01', '1994-07-01', '1996-01-01', '1997-07-01', '1999-01-01', '2006-01-01', '2009-01-01', '2012-07-01', '2015-07-01'],
  '2017-01-01',
];
const LEAP_MJDS = LEAPS.map((day) => mjdOfDay(day));
const FIRST_TAI_MINUS_UTC = 10;
const TT_MINUS_TAI = 32.184;
const TAI_MINUS_GPS = 19;

function mjdOfDay(day: string): number {
  return Date.parse(`${day}T00:00:00Z`) / MS_PER_DAY + MJD_OF_1970;
}

/** MJD of an ISO 8601 text without zone, date and time, in its own scale; null when it has no time of day or is none. */
export function mjdOfIso(iso: string): number | null {
  const match = /^(\d{4}-\d{2}-\d{2})T(\d{2}):(\d{2})(?::(\d{2}(?:\.\d+)?))?$/.exec(iso);
  if (!match) return null;
  const day = mjdOfDay(match[1]!);
  const seconds = Number(match[2]) * 3600 + Number(match[3]) * 60 + Number(match[4] ?? 0);
  // a leap second is the last of its day
  return Number.isFinite(day) && seconds < S_PER_DAY + 1 ? day + seconds / S_PER_DAY : null;
}

/** ISO 8601 without zone of an MJD, to the millisecond; null outside the years 1600 to 2600. */
export function isoOfMjd(mjd: number): string | null {
  if (!(mjd > -95_000 && mjd < 271_000)) return null;
  return new Date(Math.round((mjd - MJD_OF_1970) * MS_PER_DAY)).toISOString().slice(0, -1);
}

/** TAI - UTC in seconds; 10 before 1972, when UTC ran otherwise and a second matters nothing here. */
export function taiMinusUtc(mjdUtc: number): number {
  return FIRST_TAI_MINUS_UTC + Math.max(0, LEAP_MJDS.filter((mjd) => mjd <= mjdUtc).length - 1);
}

/** MJD in UTC of one in another scale. TDB is within 2 ms of TT, UT1 within 0.9 s of UTC: both are taken as equal, 0.03 m/s at most. */
export function utcOf(mjd: number, scale: 'utc' | 'tai' | 'tt' | 'tdb' | 'ut1' | 'gps' | 'unknown'): number {
  const secondsFromTai = { tai: 0, tt: TT_MINUS_TAI, tdb: TT_MINUS_TAI, gps: -TAI_MINUS_GPS, utc: null, ut1: null, unknown: null }[scale];
  if (secondsFromTai === null) return mjd;
  const tai = mjd - secondsFromTai / S_PER_DAY;
  return tai - taiMinusUtc(tai - 37 / S_PER_DAY) / S_PER_DAY;
}
