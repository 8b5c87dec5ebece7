import { tidy } from '../../common/http/tidy.js';

const LONGEST = 255;

/** A file's name as data: the last part of whatever path came with it, nothing hidden in it, never empty. It names no file of ours. */
export function storedFileName(delivered: string): string {
  const last = tidy(delivered.replaceAll('\0', '')).split(/[/\\]/).at(-1) ?? '';
  const name = tidy(last.replace(/[\r\n\t]/g, ' '));
  return [...name].slice(0, LONGEST).join('') || 'spectrum';
}

/** Without its endings: what a spectrum is called when nobody says otherwise. */
export const labelFrom = (fileName: string): string => fileName.replace(/(\.[A-Za-z0-9]{1,5}){1,2}$/, '').slice(0, 120) || 'spectrum';

/** Always a download, never shown in the page; the name once in plain ASCII and once as it is (RFC 6266, RFC 8187). */
export function contentDisposition(fileName: string): string {
  const plain = fileName
    .normalize('NFKD')
    .replace(/[^\x20-\x7e]/g, '_')
    .replace(/["\\%]/g, '_');
  const exact = encodeURIComponent(fileName).replace(/['()*]/g, (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`);
  return `attachment; filename="${plain}"; filename*=UTF-8''${exact}`;
}
