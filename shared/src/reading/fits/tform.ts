import { quoted, refuse } from '../refusal.js';

/** Codes of binary table columns with the bytes of one element, FITS Standard 4.0 table 18; X counts bits. */
const ELEMENT_BYTES: Record<string, number> = { L: 1, X: 0, B: 1, I: 2, J: 4, K: 8, A: 1, E: 4, D: 8, C: 8, M: 16, P: 8, Q: 16 };

export interface BinaryFormat {
  readonly code: string;
  readonly repeat: number;
  /** bytes of the field in a row */
  readonly width: number;
  /** P and Q: code of the elements in the heap */
  readonly heapCode: string | null;
}

export const elementBytes = (code: string): number => ELEMENT_BYTES[code] ?? 0;

/** Reads TFORMn of a binary table: 'D', '400E', '11X', 'PE(800)'. */
export function parseBinaryFormat(text: string, card: string): BinaryFormat {
  const match = /^(\d{0,12})([LXBIJKAEDCMPQ])(.*)$/.exec(text.trim());
  if (!match) refuse('bad_format', `${card} = '${quoted(text)}' is not a column format of a binary table.`, { card });
  const code = match[2]!;
  const repeat = match[1] === '' ? 1 : Number(match[1]);
  if (code !== 'P' && code !== 'Q') {
    const width = code === 'X' ? Math.ceil(repeat / 8) : repeat * elementBytes(code);
    return { code, repeat, width, heapCode: null };
  }
  const heap = /^([LXBIJKAEDCM])/.exec(match[3]!);
  if (!heap || repeat > 1) refuse('bad_format', `${card} = '${quoted(text)}' is not a format of a variable-length column.`, { card });
  return { code, repeat, width: repeat * elementBytes(code), heapCode: heap[1]! };
}
