/** Powers of ten that a double holds exactly. */
const POWERS = Float64Array.from({ length: 23 }, (_, n) => Number(`1e${n}`));
const [MINUS, PLUS, ZERO, NINE, UPPER_E, LOWER_E] = [0x2d, 0x2b, 0x30, 0x39, 0x45, 0x65];
/** Any integer of so many digits is below 2^53 and so exact. */
const EXACT_DIGITS = 15;

/**
 * The number written in bytes `from` to `to`, bit-equal to `Number()`: with an exact mantissa and an exact power of ten one
 * multiplication or division rounds right (Clinger 1990, PLDI, "How to read floating point numbers accurately"; from memory).
 * NaN when it is no plain short decimal: then `parseCell` decides.
 */
export function quickNumber(bytes: Uint8Array, from: number, to: number, decimalPoint: number): number {
  let i = from;
  const sign = bytes[i];
  if (sign === MINUS || sign === PLUS) i++;
  let mantissa = 0;
  let digits = 0;
  let seen = 0;
  let exponent = 0;
  let point = false;
  for (; i < to; i++) {
    const c = bytes[i]!;
    if (c >= ZERO && c <= NINE) {
      seen++;
      if (mantissa !== 0 || c !== ZERO) digits++;
      mantissa = mantissa * 10 + (c - ZERO);
      if (point) exponent--;
    } else if (c === decimalPoint && !point) point = true;
    else break;
  }
  if (seen === 0 || digits > EXACT_DIGITS) return NaN;
  if (i < to) {
    if (bytes[i] !== LOWER_E && bytes[i] !== UPPER_E) return NaN;
    const written = integerAt(bytes, i + 1, to);
    if (Number.isNaN(written)) return NaN;
    exponent += written;
  }
  if (exponent < -22 || exponent > 22) return NaN;
  const value = exponent < 0 ? mantissa / POWERS[-exponent]! : mantissa * POWERS[exponent]!;
  return sign === MINUS ? -value : value;
}

/** A signed integer of at most four digits; NaN for anything else. */
function integerAt(bytes: Uint8Array, from: number, to: number): number {
  let i = from;
  const negative = bytes[i] === MINUS;
  if (negative || bytes[i] === PLUS) i++;
  if (i >= to || to - i > 4) return NaN;
  let value = 0;
  for (; i < to; i++) {
    const digit = bytes[i]! - ZERO;
    if (digit < 0 || digit > 9) return NaN;
    value = value * 10 + digit;
  }
  return negative ? -value : value;
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
