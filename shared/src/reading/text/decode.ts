import { textDecoder, utf8Bytes } from '../platform.js';
import type { ReadWarning } from '../types.js';

export interface TextBytes {
  /** without byte-order mark; numbers and delimiters are ASCII in it */
  readonly bytes: Uint8Array;
  /** turns a piece into text */
  readonly decode: (piece: Uint8Array) => string;
}

/** UTF-8, UTF-16 with a byte-order mark, or, when it is not valid UTF-8, Latin-1 (Windows-1252) with a warning. */
export function decodeText(bytes: Uint8Array, warnings: ReadWarning[]): TextBytes {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return fromUtf16(bytes, 'utf-16le');
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return fromUtf16(bytes, 'utf-16be');
  const body = bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? bytes.subarray(3) : bytes;
  if (isUtf8(body)) {
    const decoder = textDecoder('utf-8');
    return { bytes: body, decode: (piece) => decoder.decode(piece) };
  }
  warnings.push({
    code: 'encoding',
    sentence:
      'The text is not valid UTF-8; its encoding was taken to be Latin-1. Names with accents may be wrong, numbers are not affected.',
  });
  const decoder = textDecoder('windows-1252');
  return { bytes: body, decode: (piece) => decoder.decode(piece) };
}

function fromUtf16(bytes: Uint8Array, label: string): TextBytes {
  const decoder = textDecoder('utf-8');
  return { bytes: utf8Bytes(textDecoder(label).decode(bytes)), decode: (piece) => decoder.decode(piece) };
}

const PIECE = 1 << 20;

function isUtf8(bytes: Uint8Array): boolean {
  if (isAscii(bytes)) return true;
  const strict = textDecoder('utf-8', true);
  try {
    for (let at = 0; at < bytes.length; at += PIECE) strict.decode(bytes.subarray(at, at + PIECE), { stream: true });
    strict.decode();
    return true;
  } catch {
    return false;
  }
}

/** Top bits of four bytes at once: most files are ASCII, and this looks at every byte of them. */
function isAscii(bytes: Uint8Array): boolean {
  let i = 0;
  for (; i < bytes.length && (bytes.byteOffset + i) % 4 !== 0; i++) if (bytes[i]! > 0x7f) return false;
  const words = new Int32Array(bytes.buffer, bytes.byteOffset + i, (bytes.length - i) >> 2);
  for (let k = 0; k < words.length; k++) if (words[k]! & 0x80808080) return false;
  for (i += 4 * words.length; i < bytes.length; i++) if (bytes[i]! > 0x7f) return false;
  return true;
}
