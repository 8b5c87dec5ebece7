import type { Reading } from '../reading/index.js';

/**
 * What tells the files of one instrument and pipeline from others: their shape and their writer, never their numbers. It does not depend
 * on corrections, so that a file has the same signature before and after it was corrected.
 */
export interface FileSignature {
  readonly format: Reading['format'];
  /** numeric columns of the part that was read, in file order */
  readonly columns: readonly string[];
  readonly instrument: string | null;
  readonly telescope: string | null;
  /** who wrote the file and how: 'ORIGIN = …' of a FITS header, the keys of the comment lines of a text */
  readonly writer: readonly string[];
}

/** Cards that name who wrote a file, and do not change from one night to the next. FITS Standard 4.0, section 4.4.2; CREATOR and PROCSOFT are common practice. */
const WRITER_CARD = /^(ORIGIN|CREATOR|PROCSOFT|PIPELINE)\s*=\s*'([^']*)'/;
const REMARK_KEY = /^[#;!%/*\s]*([A-Za-z][A-Za-z0-9 _.-]{0,30}?)\s*[:=]/;
/** More keys than this are a log, not a form. */
const MOST_KEYS = 24;

export function signatureOf(reading: Pick<Reading, 'format' | 'columns' | 'instrument' | 'telescope' | 'header'>): FileSignature {
  const { format, columns, instrument, telescope, header } = reading;
  return { format, columns: [...columns], instrument, telescope, writer: format === 'text' ? remarkKeys(header) : writerCards(header) };
}

function writerCards(header: readonly string[]): string[] {
  const found = header.flatMap((card) => {
    const [, keyword, value] = WRITER_CARD.exec(card) ?? [];
    return keyword ? [`${keyword} = ${value!.trim()}`] : [];
  });
  return [...new Set(found)].sort();
}

function remarkKeys(header: readonly string[]): string[] {
  const keys = header.flatMap((line) => REMARK_KEY.exec(line)?.[1]?.trim().toLowerCase().replace(/\s+/g, ' ') ?? []);
  return [...new Set(keys)].sort().slice(0, MOST_KEYS);
}

const plain = (word: string | null): string => (word ?? '').trim().replace(/\s+/g, ' ').toLowerCase();

/** One text for a signature, equal for files that are alike, however their names are spaced or capitalised. */
export const signatureKey = ({ format, columns, instrument, telescope, writer }: FileSignature): string =>
  JSON.stringify([format, columns.map(plain), plain(instrument), plain(telescope), writer.map(plain)]);

export const isSimilar = (a: FileSignature, b: FileSignature): boolean => signatureKey(a) === signatureKey(b);

const FORMAT_WORDS: Record<FileSignature['format'], string> = {
  fits_table: 'FITS tables',
  fits_ascii_table: 'FITS tables in ASCII',
  fits_image: 'FITS images',
  text: 'text tables',
};
const MOST_COLUMNS = 6;

/** 'FITS tables with the columns WAVE, FLUX, ERR of Echelle at T1'. */
export function signatureWords({ format, columns, instrument, telescope }: FileSignature): string {
  const shown =
    columns.slice(0, MOST_COLUMNS).join(', ') + (columns.length > MOST_COLUMNS ? ` and ${columns.length - MOST_COLUMNS} more` : '');
  const whole = columns.length ? ` with the ${columns.length === 1 ? 'column' : 'columns'} ${shown}` : '';
  const made = [instrument && ` of ${instrument}`, telescope && ` at ${telescope}`].filter(Boolean).join('');
  return FORMAT_WORDS[format] + whole + made;
}
