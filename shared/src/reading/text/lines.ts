import type { ReadLimits } from '../limits.js';
import { refuse } from '../refusal.js';

const [LF, CR] = [0x0a, 0x0d];

/** Walks over the lines of a text; ends may be LF, CR LF or CR. */
export class Lines {
  /** the current line is bytes `start` to `end`, its number counts from 1 */
  start = 0;
  end = 0;
  number = 0;
  private next = 0;

  constructor(
    readonly bytes: Uint8Array,
    private readonly limits: ReadLimits,
  ) {}

  /** Go to the next line; false at the end of the text. */
  advance(): boolean {
    const { bytes } = this;
    if (this.next >= bytes.length) return false;
    this.start = this.next;
    this.number++;
    const furthest = this.start + this.limits.lineBytes;
    let i = this.start;
    while (i < bytes.length && bytes[i] !== LF && bytes[i] !== CR) {
      if (i >= furthest)
        refuse(
          'line_too_long',
          `Line ${this.number} is too long: more than ${this.limits.lineBytes} characters, the limit. Is this a table of text?`,
          { row: this.number },
        );
      i++;
    }
    this.end = i;
    this.next = bytes[i] === CR && bytes[i + 1] === LF ? i + 2 : i + 1;
    return true;
  }

  /** First byte of the line that is not a blank or tab; `end` when the line is blank. */
  firstInk(): number {
    let i = this.start;
    while (i < this.end && (this.bytes[i] === 0x20 || this.bytes[i] === 0x09)) i++;
    return i;
  }
}

const [HASH, PERCENT, BANG, SLASH, BACKSLASH] = [0x23, 0x25, 0x21, 0x2f, 0x5c];

/** Whether a line whose first ink is at `at` is a remark: it starts with #, %, !, \ or //. */
export function isComment(bytes: Uint8Array, at: number): boolean {
  const c = bytes[at];
  return c === HASH || c === PERCENT || c === BANG || c === BACKSLASH || (c === SLASH && bytes[at + 1] === SLASH);
}
