import type { How } from '@foreveil/shared';
import { errorParts, fixed, signed, type NumberParts } from '../../lib/number.js';

/**
 * As `errorParts`, for a column of at most so many decimals, on which the decimal points stand under each other by figure spaces.
 * An error too small for the column is rounded up to its last place, never to nothing.
 */
export function columnParts(value: number | null, sigma: number | null, decimals: number, sign = false): NumberParts {
  const parts = errorParts(value, sigma, sign);
  if (value === null || parts.sigma === null) return parts;
  const shown = /\.(\d+)$/.exec(parts.value)?.[1]?.length ?? 0;
  if (shown > decimals)
    return { value: (sign ? signed : fixed)(value, decimals), sigma: fixed(Math.max(sigma ?? 0, 10 ** -decimals), decimals) };
  const missing = decimals - shown + (shown === 0 && decimals > 0 ? 0.5 : 0); // a point is about half a figure wide
  return { ...parts, value: parts.value + '\u2007'.repeat(Math.max(0, Math.floor(missing))) };
}

/** How a fact is known, as it stands beside it. */
export const HOW_WORD: Record<How | 'estimated', string> = {
  stated: 'stated',
  assumed: 'assumed',
  corrected: 'corrected by hand',
  not_stated: 'not stated',
  estimated: 'estimated',
};

const when = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'short', hour: '2-digit', minute: '2-digit' });

/** '14 Mar 10:02', in the reader's time zone. */
export function shortTime(iso: string): string {
  const part = Object.fromEntries(when.formatToParts(new Date(iso)).map((p) => [p.type, p.value]));
  return `${part.day} ${part.month} ${part.hour}:${part.minute}`;
}
