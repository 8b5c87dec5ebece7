const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];

/** '14 Mar 2031' of an ISO 8601 date or date-time, as it stands there: no time zone is applied. */
export function day(iso: string): string {
  const [, year, month, date] = /^(\d{4})-(\d{2})-(\d{2})/.exec(iso) ?? [];
  return year ? `${Number(date)} ${MONTHS[Number(month) - 1] ?? month} ${year}` : iso;
}

const STEPS: readonly [seconds: number, one: string, many: string][] = [
  [86_400, 'day', 'days'],
  [3600, 'h', 'h'],
  [60, 'min', 'min'],
];

/** '2 h ago', 'yesterday', '12 days ago'; a date from a month on. `now` in ms since the epoch. */
export function ago(iso: string, now: number): string {
  const seconds = Math.max(0, (now - Date.parse(iso)) / 1000);
  if (seconds > 30 * 86_400) return day(iso);
  for (const [unit, one, many] of STEPS) {
    const n = Math.floor(seconds / unit);
    if (n === 1 && unit === 86_400) return 'yesterday';
    if (n >= 1) return `${n} ${n === 1 ? one : many} ago`;
  }
  return 'just now';
}
