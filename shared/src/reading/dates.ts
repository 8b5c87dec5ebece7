/** A date in the words of a file. */
export interface WrittenDate {
  /** ISO 8601 without zone; a day alone when there is no time */
  readonly iso: string;
  /** it came with a zone and is UTC now */
  readonly zoned: boolean;
}

/**
 * A date of a card or a remark: '2026-03-04T05:06:07', '2026-03-04' with the time in `time`, or the old '04/03/99', which means
 * 1999-03-04 (FITS Standard 4.0 section 4.4.2). A zone, which FITS does not allow, turns it into UTC. Null when it is no date.
 */
export function dateOf(text: string, time = ''): WrittenDate | null {
  const iso = /^(\d{4}-\d{2}-\d{2})(?:[T ](\d{2}:\d{2}(?::\d{2}(?:\.\d+)?)?))?\s*(Z|UTC?|[+-]\d{2}:?\d{2})?$/i.exec(text.trim());
  const old = /^(\d{2})\/(\d{2})\/(\d{2})$/.exec(text.trim());
  const day = iso ? iso[1]! : old ? `19${old[3]}-${old[2]}-${old[1]}` : null;
  if (day === null || !isDay(day)) return null;
  const clock = iso?.[2] ?? (/^\d{2}:\d{2}:\d{2}(?:\.\d+)?$/.test(time.trim()) ? time.trim() : null);
  if (clock === null) return { iso: day, zoned: false };
  if (!/^(?:[01]\d|2[0-3]):[0-5]\d/.test(clock)) return null;
  const offset = /^([+-])(\d{2}):?(\d{2})$/.exec(iso?.[3] ?? '');
  if (!offset) return { iso: `${day}T${clock}`, zoned: iso?.[3] !== undefined };
  const minutes = (Number(offset[2]) * 60 + Number(offset[3])) * (offset[1] === '-' ? -1 : 1);
  return { iso: earlierBy(minutes, day, clock), zoned: true };
}

/** A day of the calendar: 2026-02-30 is none. */
function isDay(day: string): boolean {
  const ms = Date.parse(`${day}T00:00:00Z`);
  return !Number.isNaN(ms) && new Date(ms).toISOString().startsWith(day);
}

/** Whole minutes are moved, so that the digits of the seconds stay as written. */
function earlierBy(minutes: number, day: string, clock: string): string {
  const moved = new Date(Date.parse(`${day}T${clock.slice(0, 5)}:00Z`) - minutes * 60_000);
  return `${moved.toISOString().slice(0, 16)}${clock.slice(5)}`;
}
