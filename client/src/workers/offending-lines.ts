/** A line of a text file near a fault. */
export interface OffendingLine {
  /** counted from 1 */
  readonly number: number;
  readonly text: string;
  readonly atFault: boolean;
}

const AROUND = 1;
const LONGEST = 120;
/** A longer text is not decoded only to show three of its lines. */
const MOST_BYTES = 64 * 1024 * 1024;
const NEWLINE = 10;

/** The line at fault with its neighbours; nothing for binary files, packed files, or when no line is to blame. */
export function offendingLines(bytes: Uint8Array, row: number | undefined): OffendingLine[] {
  if (row === undefined || row < 1 || bytes.length > MOST_BYTES || isBinary(bytes)) return [];
  const out: OffendingLine[] = [];
  let number = 1;
  for (let start = 0; start < bytes.length && number <= row + AROUND; number++) {
    const newline = bytes.indexOf(NEWLINE, start);
    const end = newline < 0 ? bytes.length : newline;
    if (number >= row - AROUND) out.push({ number, text: shown(bytes.subarray(start, end)), atFault: number === row });
    start = end + 1;
  }
  return out.some(({ atFault }) => atFault) ? out : [];
}

const isBinary = (bytes: Uint8Array) => bytes.subarray(0, 4096).includes(0) || (bytes[0] === 0x1f && bytes[1] === 0x8b);

function shown(line: Uint8Array): string {
  const text = new TextDecoder('utf-8').decode(line.subarray(0, 4 * LONGEST));
  // eslint-disable-next-line no-control-regex -- what would not show, or turn the direction of the text around
  const plain = text.replace(/[\u0000-\u0008\u000b-\u001f\u007f-\u009f\u200e\u200f\u202a-\u202e\u2066-\u2069]/g, '').replace(/\t/g, '    ');
  return plain.length > LONGEST ? `${plain.slice(0, LONGEST)}…` : plain;
}
