import { latin1 } from './platform.js';

export type Content = 'empty' | 'fits' | 'gzip' | 'utf16' | 'text' | 'binary' | 'nearly_fits' | { readonly foreign: string };

const SIGNATURES: [string, string][] = [
  ['\x89PNG', 'a PNG image'],
  ['%PDF-', 'a PDF document'],
  ['PK\x03\x04', 'a ZIP archive, such as a spreadsheet (xlsx)'],
  ['PK\x05\x06', 'an empty ZIP archive'],
  ['\xff\xd8\xff', 'a JPEG image'],
  ['GIF8', 'a GIF image'],
  ['\xd0\xcf\x11\xe0', 'an old office document or spreadsheet (xls)'],
  ['BZh', 'a bzip2 archive'],
  ['\xfd7zXZ', 'an xz archive'],
  ['\x28\xb5\x2f\xfd', 'a zstd archive'],
  ['7z\xbc\xaf', 'a 7-Zip archive'],
  ['Rar!', 'a RAR archive'],
  ['\x89HDF', 'an HDF5 file'],
  ['\x7fELF', 'a program'],
  ['{\\rtf', 'an RTF document'],
];

/** How many bytes are looked at for signs of text. */
const LOOKED_AT = 4096;

/** What a file is by its first bytes; its name does not count. */
export function recognise(bytes: Uint8Array): Content {
  if (bytes.length === 0) return 'empty';
  const start = latin1(bytes, 0, Math.min(bytes.length, LOOKED_AT));
  if (/^SIMPLE {2}= *[TF]/.test(start)) return 'fits';
  if (start.startsWith('\x1f\x8b')) return 'gzip';
  if (start.startsWith('\xff\xfe') || start.startsWith('\xfe\xff')) return 'utf16';
  for (const [signature, name] of SIGNATURES) if (start.startsWith(signature)) return { foreign: name };
  const head = start
    .replace(/^\xef\xbb\xbf/, '')
    .trimStart()
    .slice(0, 200)
    .toLowerCase();
  if (head.startsWith('<!doctype html') || head.startsWith('<html'))
    return { foreign: 'an HTML page, perhaps an error page saved as a file' };
  if (head.startsWith('<?xml') || head.startsWith('<votable') || head.startsWith('<svg')) return { foreign: 'an XML document' };
  if (/^(?:XTENSION|[A-Z][A-Z0-9_-]{0,7} *=).{70}/.test(start.slice(0, 80)) && !start.slice(0, 240).includes('\n')) return 'nearly_fits';
  return looksBinary(start) ? 'binary' : 'text';
}

/** Control characters other than tabs, line ends, form feeds and the end-of-file mark of old systems. */
// eslint-disable-next-line no-control-regex -- control characters are what is looked for
const looksBinary = (start: string): boolean => /[\x00-\x08\x0b\x0e-\x19\x1b-\x1f]/.test(start);
