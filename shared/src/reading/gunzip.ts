import { Gunzip } from 'fflate';
import { crc32 } from './crc32.js';
import type { ReadLimits } from './limits.js';
import { refuse, Refusal } from './refusal.js';

export const isGzip = (bytes: Uint8Array): boolean => bytes.length > 2 && bytes[0] === 0x1f && bytes[1] === 0x8b;

/** Packed bytes handed over at a time: deflate can make 1032 of one, so what is unpacked at once stays below 17 MB. */
const SLICE = 16 * 1024;
/** the same while it is not known what the file is like */
const FIRST_SLICES = 2 * 1024;

/**
 * The content of a gzip file, checked against the checksums it carries.
 * Stops as soon as a limit is passed. `onTooLarge` may look at the beginning and name a better reason.
 */
export function gunzip(packed: Uint8Array, limits: ReadLimits, onTooLarge: (beginning: Uint8Array) => void): Uint8Array {
  const parts: Uint8Array[] = [];
  let total = 0;
  let crc = 0;
  let memberStart = 0;
  const checkMember = (end: number) => {
    if (readUint32(packed, end - 8) !== crc >>> 0 || readUint32(packed, end - 4) !== (total - memberStart) >>> 0)
      refuse('gzip_damaged', 'The gzip file is damaged: its checksum (CRC) does not match what it unpacks to. Copy or download it again.');
    crc = 0;
    memberStart = total;
  };
  const stream = new Gunzip((part) => {
    total += part.length;
    crc = crc32(part, crc);
    parts.push(part);
  });
  stream.onmember = checkMember;
  try {
    for (let at = 0; at < packed.length;) {
      const end = Math.min(packed.length, at + (total < limits.ratioFromBytes ? FIRST_SLICES : SLICE));
      stream.push(packed.subarray(at, end), end === packed.length);
      at = end;
      checkSize(total, at);
    }
  } catch (error) {
    if (error instanceof Refusal) throw error;
    explain(error);
  }
  checkMember(packed.length);
  return joined(parts, total);

  function checkSize(unpacked: number, used: number) {
    const tooLarge = unpacked > limits.unpackedBytes;
    if (!tooLarge && (unpacked <= limits.ratioFromBytes || unpacked <= used * limits.unpackRatio)) return;
    onTooLarge(joined(parts.slice(0, 8), -1));
    const limit = tooLarge ? `${Math.round(limits.unpackedBytes / 1024 / 1024)} MiB` : `${limits.unpackRatio} times its size`;
    refuse(
      'too_large',
      `The gzip file unpacks to more than ${limit}, the limit: too large. Upload the spectrum alone, unpacked or in a smaller file.`,
    );
  }
}

/** What fflate's error codes mean here: 0 is an unexpected end, the others are nonsense in the stream. */
function explain(error: unknown): never {
  const ended = (error as { code?: unknown }).code === 0;
  refuse(
    ended ? 'gzip_truncated' : 'gzip_damaged',
    ended
      ? 'The gzip file is incomplete: it ends in the middle of its compressed data. Copy or download it again.'
      : 'The gzip file is damaged: its compressed data are invalid. Copy or download it again.',
  );
}

function readUint32(bytes: Uint8Array, at: number): number {
  if (at < 0 || at + 4 > bytes.length) return -1;
  return (bytes[at]! | (bytes[at + 1]! << 8) | (bytes[at + 2]! << 16) | (bytes[at + 3]! << 24)) >>> 0;
}

function joined(parts: readonly Uint8Array[], total: number): Uint8Array {
  if (parts.length === 1) return parts[0]!;
  const size = total >= 0 ? total : parts.reduce((sum, part) => sum + part.length, 0);
  const out = new Uint8Array(size);
  let at = 0;
  for (const part of parts) {
    out.set(part, at);
    at += part.length;
  }
  return out;
}
