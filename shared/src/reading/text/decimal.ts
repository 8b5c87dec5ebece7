/**
 * Decimal numbers of up to 19 digits to doubles, bit-equal to `Number()`, without making a string.
 *
 * Short ones by an exact mantissa and an exact power of ten (Clinger 1990, PLDI, "How to read floating point numbers
 * accurately"); longer ones by a product of two double-doubles (Dekker 1971, Numer. Math. 18, 224), taken only when its error
 * cannot change the rounding. Both sources from memory.
 */

/** Powers of ten that a double holds exactly. */
const EXACT_POWERS = Float64Array.from({ length: 23 }, (_, n) => Number(`1e${n}`));
/** Largest power of ten of the long way; far from overflow and from subnormal numbers. */
const MOST_POWER = 250;
const HIGH = new Float64Array(2 * MOST_POWER + 1).fill(NaN);
const LOW = new Float64Array(2 * MOST_POWER + 1);
/** 2^27 + 1 splits a double into two halves of 26 bits. */
const SPLITTER = 134_217_729;
/** The product is right to 2^-100; what is nearer to a tie than this share of half a unit is left to `Number()`. */
const SAFE = 1 + 2 ** -45;

/**
 * (lead * 10^shift + tail) * 10^power.
 * @param lead leading digits, below 2^53
 * @param tail the digits after them, below 10^shift
 * @param shift how many digits `tail` has, at most 4
 * @returns NaN when rounding is not certain or the power is too large
 */
export function fromDecimal(lead: number, tail: number, shift: number, power: number): number {
  if (shift === 0 && power >= -22 && power <= 22) return power < 0 ? lead / EXACT_POWERS[-power]! : lead * EXACT_POWERS[power]!;
  if (lead === 0 && tail === 0) return 0;
  if (power < -MOST_POWER || power > MOST_POWER) return NaN;
  const k = power + MOST_POWER;
  if (Number.isNaN(HIGH[k]!)) fillPower(power);
  const [ph, pl] = [HIGH[k]!, LOW[k]!];
  // the mantissa, exactly: two parts
  const scale = EXACT_POWERS[shift]!;
  const product = lead * scale;
  const rest = productError(lead, scale, product) + tail;
  const mh = product + rest;
  const ml = rest - (mh - product);
  const x = mh * ph;
  const y = productError(mh, ph, x) + (mh * pl + ml * ph);
  const high = x + y;
  const low = y - (high - x);
  return high + low * SAFE === high ? high : NaN;
}

/** a * b - product, exactly. */
function productError(a: number, b: number, product: number): number {
  const ca = SPLITTER * a;
  const ah = ca - (ca - a);
  const al = a - ah;
  const cb = SPLITTER * b;
  const bh = cb - (cb - b);
  const bl = b - bh;
  return al * bl - (product - ah * bh - al * bh - ah * bl);
}

/** 10^power as the sum of two doubles, by whole numbers. */
function fillPower(power: number) {
  const high = Number(`1e${power}`);
  const k = power + MOST_POWER;
  HIGH[k] = high;
  if (power >= 0) {
    LOW[k] = Number(10n ** BigInt(power) - BigInt(high));
    return;
  }
  // high = mantissa / 2^bits; what is left of 10^power, times 2^(bits + 64)
  const bits = 52 - Math.floor(Math.log2(high));
  const mantissa = BigInt(high * 2 ** bits);
  const ten = 10n ** BigInt(-power);
  const left = (((1n << BigInt(bits)) - mantissa * ten) << 64n) / ten;
  LOW[k] = Number(left) * 2 ** -64 * 2 ** -bits;
}
