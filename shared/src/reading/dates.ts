/** Days from the Modified Julian Date's origin, 1858-11-17, to 1970-01-01. */
const MJD_OF_1970 = 40587;
const MS_PER_DAY = 86_400_000;

/** ISO 8601 without zone of a Modified Julian Date, to the millisecond; null outside the years 1600 to 2600. */
export function isoFromMjd(mjd: number): string | null {
  if (!(mjd > -95_000 && mjd < 271_000)) return null;
  return new Date(Math.round((mjd - MJD_OF_1970) * MS_PER_DAY)).toISOString().slice(0, -1);
}

/**
 * A date of a FITS card as ISO 8601 without zone: '2026-03-04T05:06:07', '2026-03-04' with the time in `time`, or the old
 * '04/03/99', which means 1999-03-04 (FITS Standard 4.0 section 4.4.2). Null when it is no date.
 */
export function isoFromFitsDate(text: string, time = ''): string | null {
  const iso = /^(\d{4}-\d{2}-\d{2})(?:[T ](\d{2}:\d{2}(?::\d{2}(?:\.\d+)?)?))?(?:Z|[+-]\d{2}:?\d{2})?$/.exec(text.trim());
  const old = /^(\d{2})\/(\d{2})\/(\d{2})$/.exec(text.trim());
  const day = iso ? iso[1]! : old ? `19${old[3]}-${old[2]}-${old[1]}` : null;
  if (day === null || Number.isNaN(Date.parse(`${day}T00:00:00Z`))) return null;
  const clock = iso?.[2] ?? (/^\d{2}:\d{2}:\d{2}(?:\.\d+)?$/.test(time.trim()) ? time.trim() : null);
  return clock ? `${day}T${clock}` : day;
}
