/** A number and its 1 sigma error as text, both with the same decimals; the error is empty when there is none. */
export interface Rounded {
  readonly value: string;
  readonly sigma: string;
}

/** Digits of a number whose error is not known. */
const DIGITS_WITHOUT_ERROR = 6;

/**
 * Rounds to two significant digits of the error: 589.1352300 ± 0.0000218 gives 589.135230 and 0.000022.
 * An error that is not positive and finite is unknown; the value then has six significant digits. A value that is not finite is empty.
 */
export function roundedToError(value: number, sigma: number | null): Rounded {
  if (!Number.isFinite(value)) return { value: '', sigma: '' };
  if (sigma === null || !Number.isFinite(sigma) || sigma <= 0) return { value: plain(value, DIGITS_WITHOUT_ERROR), sigma: '' };
  // rounding first: 0.0996 becomes 0.10, which has one decimal less than 0.0996 promises
  const decimals = 1 - Math.floor(Math.log10(Number(sigma.toPrecision(2))));
  return { value: fixed(value, decimals), sigma: fixed(sigma, decimals) };
}

/** A number with at most so many significant digits, without trailing zeros. */
export const plain = (value: number, digits: number): string => withoutMinusZero(String(Number(value.toPrecision(digits))));

/** Rounded to a place before or after the point; negative decimals round to tens, hundreds and so on. */
function fixed(value: number, decimals: number): string {
  if (decimals >= 0) return withoutMinusZero(value.toFixed(Math.min(decimals, 100)));
  const step = 10 ** -decimals;
  return withoutMinusZero((Math.round(value / step) * step).toFixed(0));
}

const withoutMinusZero = (text: string): string => (/^-0(\.0*)?$/.test(text) ? text.slice(1) : text);
