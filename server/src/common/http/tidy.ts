import { Transform } from 'class-transformer';

/** Halves of surrogate pairs, which are no characters. */
const BROKEN = /\p{Surrogate}/gu;
/** Control characters (but line ends and tabs) and marks that turn the direction of text around: they can only hide something. */
// eslint-disable-next-line no-control-regex
const HIDDEN = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f\u200e\u200f\u202a-\u202e\u2066-\u2069]/g;

/** Text as stored: one Unicode form, nothing hidden, no blanks around it. */
export const tidy = (text: string): string => text.replace(BROKEN, '').normalize('NFC').replace(HIDDEN, '').trim();

/** Tidies a text field of a request before it is checked. */
export const Tidy = () => Transform(({ value }) => (typeof value === 'string' ? tidy(value) : value));
