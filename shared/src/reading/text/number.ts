import { fromDecimal } from './decimal.js';

const [MINUS, PLUS, ZERO, NINE, UPPER_E, LOWER_E] = [0x2d, 0x2b, 0x30, 0x39, 0x45, 0x65];
/** Any integer of so many digits is below 2^53 and so exact. */
const LEAD_DIGITS = 15;
const MOST_DIGITS = 19;

/** Where `scanNumber` stopped: the first byte that is no part of the number. */
export const scan = { stop: 0 };

/**
 * The number that starts at byte `from`, before `end`, bit-equal to `Number()`; `scan.stop` is where it ends. NaN when there is none,
 * or none that the quick way can read: then `parseCell` decides on the whole cell.
 */
export function scanNumber(bytes: Uint8Array, from: number, end: number, decimalPoint: number): number {
  let i = from;
  const sign = bytes[i];
  if (sign === MINUS || sign === PLUS) i++;
  let lead = 0;
  let tail = 0;
  let digits = 0;
  let seen = 0;
  let power = 0;
  let point = false;
  for (; i < end; i++) {
    const digit = bytes[i]! - ZERO;
    if (digit >= 0 && digit <= 9) {
      seen++;
      if (digits < LEAD_DIGITS) lead = lead * 10 + digit;
      else tail = tail * 10 + digit;
      // zeros in front do not count
      if (digits > 0 || digit > 0) digits++;
      if (digits > MOST_DIGITS) return NaN;
      if (point) power--;
    } else if (digit === decimalPoint - ZERO && !point) point = true;
    else break;
  }
  if (seen === 0) return NaN;
  if (i < end && (bytes[i] === LOWER_E || bytes[i] === UPPER_E)) {
    i = scanExponent(bytes, i + 1, end);
    if (i < 0) return NaN;
    power += exponent;
  }
  scan.stop = i;
  const value = fromDecimal(lead, tail, digits > LEAD_DIGITS ? digits - LEAD_DIGITS : 0, power);
  return sign === MINUS ? -value : value;
}

let exponent = 0;

/** A signed integer of one to four digits into `exponent`. @returns where it ends, or -1 when it is none */
function scanExponent(bytes: Uint8Array, from: number, end: number): number {
  let i = from;
  const negative = bytes[i] === MINUS;
  if (negative || bytes[i] === PLUS) i++;
  const first = i;
  let value = 0;
  for (; i < end && i < first + 5; i++) {
    const digit = bytes[i]!;
    if (digit < ZERO || digit > NINE) break;
    value = value * 10 + (digit - ZERO);
  }
  if (i === first || i === first + 5) return -1;
  exponent = negative ? -value : value;
  return i;
}

/** The number that bytes `from` to `to` are, as above; NaN when they are more or less than one. */
export function quickNumber(bytes: Uint8Array, from: number, to: number, decimalPoint: number): number {
  const value = scanNumber(bytes, from, to, decimalPoint);
  return scan.stop === to ? value : NaN;
}

const MISSING = new Set([
  '',
  'nan',
  'null',
  'none',
  'indef',
  'indefinite',
  'n/a',
  'na',
  '#n/a',
  '-',
  '--',
  '---',
  '...',
  '""',
  'inf',
  '+inf',
  '-inf',
  'infinity',
  '-infinity',
  'masked',
]);
const NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[EDed][+-]?\d+)?$/;

export type Cell = { readonly kind: 'number'; readonly value: number } | { readonly kind: 'missing' | 'text' | 'out_of_range' };

/** What a cell of a text table holds. Missing values are written in many ways; infinities count as missing. */
export function parseCell(text: string, decimalComma: boolean): Cell {
  const plain = decimalComma ? text.trim().replace(',', '.') : text.trim();
  if (NUMBER.test(plain)) {
    const value = Number(plain.replace(/[Dd]/, 'e'));
    return Number.isFinite(value) ? { kind: 'number', value } : { kind: 'out_of_range' };
  }
  return { kind: MISSING.has(plain.toLowerCase()) ? 'missing' : 'text' };
}
