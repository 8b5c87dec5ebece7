import type { ReadContext } from '../context.js';
import type { ReadLimits } from '../limits.js';
import { latin1 } from '../platform.js';
import { Refusal, refuse } from '../refusal.js';
import type { ReadProblem, ReadWarning } from '../types.js';
import { BLOCK, readHeader, type Header } from './header.js';

export type HduKind = 'image' | 'binary_table' | 'ascii_table' | 'other';

/** A header and data unit. */
export interface Hdu {
  readonly index: number;
  readonly kind: HduKind;
  readonly header: Header;
  readonly headerStart: number;
  readonly dataStart: number;
  /** bytes of data without the padding */
  readonly dataBytes: number;
  /** 'HDU 1 SPECTRUM' */
  readonly place: string;
}

const BITPIX = new Set([8, 16, 32, 64, -32, -64]);

/**
 * The units of a FITS file in order. When one is damaged, the ones before it and the problem are returned together: the
 * spectrum may be whole.
 */
export function readHdus({ bytes, limits, warnings }: ReadContext): { hdus: Hdu[]; problem: ReadProblem | null } {
  const hdus: Hdu[] = [];
  try {
    let at = 0;
    while (at < bytes.length) {
      if (hdus.length > 0 && !startsExtension(bytes, at)) {
        noteRest(bytes, at, warnings);
        break;
      }
      const hdu = readHdu(bytes, at, hdus.length, limits);
      hdus.push(hdu);
      at = hdu.dataStart + Math.ceil(hdu.dataBytes / BLOCK) * BLOCK;
    }
    if (at > bytes.length)
      warnings.push({
        code: 'not_padded',
        sentence: 'The last block of the FITS file is not filled up to 2880 bytes; the data themselves are complete.',
      });
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    return { hdus, problem: error.problem };
  }
  return { hdus, problem: null };
}

const startsExtension = (bytes: Uint8Array, at: number): boolean => latin1(bytes, at, Math.min(bytes.length, at + 8)) === 'XTENSION';

function noteRest(bytes: Uint8Array, at: number, warnings: ReadWarning[]) {
  if (bytes.subarray(at).every((byte) => byte === 0 || byte === 0x20)) return;
  warnings.push({
    code: 'trailing_bytes',
    sentence: `After the last unit of the FITS file come ${bytes.length - at} bytes that are not FITS; they were ignored.`,
  });
}

function readHdu(bytes: Uint8Array, start: number, index: number, limits: ReadLimits): Hdu {
  const { header, end } = readHeader(bytes, start, `HDU ${index}`, limits);
  const name = header.text('EXTNAME');
  const place = `HDU ${index}${name ? ` ${name}` : ''}`;
  const dataBytes = sizeOfData(header, place);
  const present = bytes.length - end;
  if (present < dataBytes) refuseShort(header, place, Math.max(0, present), dataBytes);
  return { index, kind: kindOf(header, index), header, headerStart: start, dataStart: end, dataBytes, place };
}

function kindOf(header: Header, index: number): HduKind {
  if (index === 0) return 'image';
  const type = header.text('XTENSION');
  if (type === 'IMAGE' || type === 'IUEIMAGE') return 'image';
  if (type === 'BINTABLE' || type === 'A3DTABLE') return 'binary_table';
  return type === 'TABLE' ? 'ascii_table' : 'other';
}

/** FITS Standard 4.0, equations 1 and 2. */
function sizeOfData(header: Header, place: string): number {
  const bitpix = header.get('BITPIX');
  if (typeof bitpix !== 'number' || !BITPIX.has(bitpix))
    refuse(
      'card_invalid',
      `BITPIX in the header of ${place} is ${typeof bitpix === 'number' ? bitpix : 'not a number'}; the FITS Standard allows 8, 16, 32, 64, -32 and -64.`,
      { card: 'BITPIX' },
    );
  const naxis = header.count('NAXIS');
  if (naxis > 999)
    refuse('card_invalid', `NAXIS = ${naxis} in the header of ${place} is too large; the FITS Standard allows 999.`, { card: 'NAXIS' });
  if (naxis === 0) return 0;
  let elements = 1;
  for (let axis = 1; axis <= naxis; axis++) elements *= header.count(`NAXIS${axis}`);
  if (header.get('GROUPS') === true)
    refuse('random_groups', `${place} holds random groups, which are not spectra and not supported.`, { card: 'GROUPS' });
  const groups = header.count('GCOUNT', 1);
  if (groups !== 1) refuse('card_invalid', `GCOUNT = ${groups} in the header of ${place} is invalid: it must be 1.`, { card: 'GCOUNT' });
  return (Math.abs(bitpix) / 8) * (header.count('PCOUNT', 0) + elements);
}

function refuseShort(header: Header, place: string, present: number, needed: number): never {
  const rows = header.text('XTENSION')?.endsWith('TABLE')
    ? ` (${Math.floor(present / Math.max(1, header.count('NAXIS1')))} of ${header.count('NAXIS2')} rows)`
    : '';
  refuse(
    'data_truncated',
    `The file is incomplete: ${place} should hold ${needed} bytes of data, but the file ends after ${present}${rows}. Copy or download it again.`,
  );
}
