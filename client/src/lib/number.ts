/** Typeset with the minus sign U+2212. For screens only: a CSV never holds it. */
export const typeset = (text: string): string => text.replace(/-/g, '\u2212');

const THIN_SPACE = '\u202f';

/** What stands where there is no number. */
export const NO_NUMBER = '\u2014';

/** Groups of three from 10 000 on, parted by a narrow space. */
function grouped(text: string): string {
  const [, sign = '', whole = '', rest = ''] = /^([^\d]*)(\d+)(.*)$/.exec(text) ?? [];
  return whole.length < 5 ? text : sign + whole.replace(/\B(?=(\d{3})+$)/g, THIN_SPACE) + rest;
}

/** A fixed number of decimals; never "−0". */
export function fixed(value: number, decimals: number): string {
  if (!Number.isFinite(value)) return NO_NUMBER;
  const text = value.toFixed(decimals);
  return grouped(typeset(Number(text) === 0 ? text.replace('-', '') : text));
}

/** As `fixed`, with a plus sign where positive; for velocities and differences. */
export const signed = (value: number, decimals: number): string => {
  const text = fixed(value, decimals);
  return value > 0 && Number(value.toFixed(decimals)) > 0 ? `+${text}` : text;
};

export const count = (value: number): string => fixed(value, 0);

/** A count with its noun, '1 line', '24 lines'. */
export const counted = (n: number, one: string, many = `${one}s`): string => `${count(n)} ${n === 1 ? one : many}`;

/** Place of the last digit when `sigma` keeps two significant digits: 2 for 0.21, 3 for 0.021, -1 for 210. */
function lastPlace(sigma: number): number {
  const rounded = Number(sigma.toPrecision(2)); // 0.0996 becomes 0.10: one place fewer
  return 1 - Math.floor(Math.log10(rounded));
}

const roundTo = (value: number, place: number): string => {
  if (place >= 0) return fixed(value, Math.min(place, 12));
  const step = 10 ** -place;
  return fixed(Math.round(value / step) * step, 0);
};

export interface NumberParts {
  readonly value: string;
  /** without the ±; null when the error is not known */
  readonly sigma: string | null;
}

/** Value and 1-sigma error apart, for columns in which both line up; digits follow the error. */
export function errorParts(value: number | null, sigma: number | null, sign = false): NumberParts {
  if (value === null || !Number.isFinite(value)) return { value: NO_NUMBER, sigma: null };
  const plus = sign && value > 0 ? '+' : '';
  if (sigma === null || !Number.isFinite(sigma) || sigma <= 0)
    return { value: plus + grouped(typeset(String(Number(value.toPrecision(6))))), sigma: null };
  const place = lastPlace(sigma);
  return { value: plus + roundTo(value, place), sigma: roundTo(sigma, place) };
}

/** '4226.728 ± 0.021'; digits follow the error, which keeps two significant ones. */
export function withError(value: number | null, sigma: number | null, sign = false): string {
  const parts = errorParts(value, sigma, sign);
  return parts.sigma === null ? parts.value : `${parts.value} ± ${parts.sigma}`;
}

/** Equivalent widths are kept in nm and shown in mÅ. */
export const MILLIANGSTROM_PER_NM = 1e4;

/** A probability to three decimals, never rounded to certainty. */
export function probability(p: number): string {
  if (!Number.isFinite(p)) return NO_NUMBER;
  if (p > 0.9995) return '>0.999';
  if (p < 0.0005) return '<0.001';
  return p.toFixed(3);
}

export const percent = (fraction: number): string => `${Math.round(fraction * 100)} %`;

/** '1.1 MB', in powers of ten. */
export function fileSize(bytes: number): string {
  if (bytes < 1000) return `${bytes} B`;
  const [value, unit] = bytes < 1e6 ? [bytes / 1e3, 'kB'] : bytes < 1e9 ? [bytes / 1e6, 'MB'] : [bytes / 1e9, 'GB'];
  return `${value < 10 ? value.toFixed(1) : Math.round(value)} ${unit}`;
}

/** A number as people type it: blanks, decimal comma, typeset minus, exponent; null when it is none. */
export function parseNumber(text: string): number | null {
  const plain = text
    .trim()
    .replace(/[\s\u202f\u00a0]/g, '')
    .replace(/\u2212/g, '-')
    .replace(/^([^.,]*),(\d+)$/, '$1.$2');
  return /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(plain) ? Number(plain) : null;
}
