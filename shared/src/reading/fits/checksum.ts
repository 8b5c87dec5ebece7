import type { ChecksumVerdict, ReadWarning } from '../types.js';
import type { Hdu } from './hdu.js';
import { BLOCK } from './header.js';

/** Ones' complement sum of 32-bit big-endian words, FITS Standard 4.0 appendix J. `bytes` may end inside a word. */
function onesComplementSum(bytes: Uint8Array, from: number, to: number): number {
  let high = 0;
  let low = 0;
  const whole = from + Math.floor((to - from) / 4) * 4;
  let i = from;
  while (i < whole) {
    // 16-bit halves of 2^15 words stay below 2^31
    const end = Math.min(whole, i + 4 * 32768);
    for (; i < end; i += 4) {
      high += (bytes[i]! << 8) | bytes[i + 1]!;
      low += (bytes[i + 2]! << 8) | bytes[i + 3]!;
    }
    ({ high, low } = carried(high, low));
  }
  for (let k = 0; i < to; i++, k++) {
    if (k < 2) high += bytes[i]! << (8 * (1 - k));
    else low += bytes[i]! << (8 * (3 - k));
  }
  ({ high, low } = carried(high, low));
  return high * 65536 + low;
}

function carried(high: number, low: number): { high: number; low: number } {
  while (high > 0xffff || low > 0xffff) {
    const fromHigh = Math.floor(high / 65536);
    const fromLow = Math.floor(low / 65536);
    high = (high % 65536) + fromLow;
    low = (low % 65536) + fromHigh;
  }
  return { high, low };
}

/** What DATASUM and CHECKSUM of a unit say of its content; a mismatch is a warning, not a refusal. */
export function verifyChecksums(bytes: Uint8Array, hdu: Hdu, warnings: ReadWarning[]): ChecksumVerdict {
  const datasum = hdu.header.text('DATASUM');
  const checksum = hdu.header.text('CHECKSUM');
  if (datasum === null && checksum === null) return { place: hdu.place, verdict: 'absent' };
  const end = Math.min(bytes.length, hdu.dataStart + Math.ceil(hdu.dataBytes / BLOCK) * BLOCK);
  const dataSum = onesComplementSum(bytes, hdu.dataStart, end);
  const wrong: string[] = [];
  // no digits stand for "not computed"
  if (datasum !== null && /^\d+$/.test(datasum) && Number(datasum) !== dataSum) wrong.push('DATASUM');
  if (checksum !== null) {
    const total = carriedSum(onesComplementSum(bytes, hdu.headerStart, hdu.dataStart), dataSum);
    // the checksum is chosen to make the total all ones, which is the other zero
    if (total !== 0xffffffff && total !== 0) wrong.push('CHECKSUM');
  }
  if (wrong.length === 0) return { place: hdu.place, verdict: 'verified' };
  warnings.push({
    code: 'checksum_wrong',
    sentence: `${wrong.join(' and ')} of ${hdu.place} ${wrong.length > 1 ? 'do' : 'does'} not match the content (checksum wrong): the file was changed or damaged after it was written.`,
  });
  return { place: hdu.place, verdict: 'mismatch' };
}

function carriedSum(a: number, b: number): number {
  const sum = a + b;
  return sum > 0xffffffff ? sum - 0xffffffff : sum;
}
