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
