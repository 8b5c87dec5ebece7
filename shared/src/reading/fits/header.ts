import type { ReadLimits } from '../limits.js';
import { latin1 } from '../platform.js';
import { quoted, refuse } from '../refusal.js';
import { parseValue, stringOf, type CardValue } from './card.js';

export const CARD = 80;
export const BLOCK = 2880;

/** One header of a FITS file: its cards verbatim and the values of its keywords, the last of duplicates winning. */
export class Header {
  private readonly values = new Map<string, CardValue>();
  /** keywords that occur more than once */
  readonly duplicates: string[] = [];
  /** cards that the standard does not allow; they are kept verbatim and otherwise ignored */
  readonly illegal: string[] = [];

  constructor(readonly cards: readonly string[]) {
    for (let i = 0; i < cards.length; i++) i = this.take(i);
  }

  get(keyword: string): CardValue | undefined {
    return this.values.get(keyword);
  }

  text(keyword: string): string | null {
    const value = this.values.get(keyword);
    return typeof value === 'string' && value.trim() !== '' ? value.trim() : null;
  }

  number(keyword: string): number | null {
    const value = this.values.get(keyword);
    return typeof value === 'number' && Number.isFinite(value) ? value : null;
  }

  /** A whole number that is not negative; refuses anything else, naming the card. */
  count(keyword: string, absent?: number): number {
    const value = this.values.get(keyword);
    if (value === undefined && absent !== undefined) return absent;
    if (value === undefined)
      refuse(
        'card_missing',
        `The FITS header lacks the required card ${keyword}: it is missing. The file does not follow the FITS Standard.`,
        { card: keyword },
      );
    if (typeof value !== 'number' || !Number.isSafeInteger(value) || value < 0)
      refuse(
        'card_invalid',
        `The card ${keyword} = ${shown(value)} of the FITS header is invalid${Number(value) < 0 ? ' (negative)' : ''}: it must be a whole number, zero or more.`,
        { card: keyword },
      );
    return value;
  }

  /** Take card i and its continuations. @returns the index of the last card used */
  private take(i: number): number {
    const card = this.cards[i]!;
    const hierarch = card.startsWith('HIERARCH') && card.includes('=');
    const keyword = hierarch ? card.slice(9, card.indexOf('=')).trim() : card.slice(0, 8).trim();
    if (!hierarch && card.slice(8, 10) !== '= ') return i;
    if (!hierarch && !/^[A-Z0-9_-]+$/.test(keyword)) {
      this.illegal.push(keyword);
      return i;
    }
    let value = parseValue(hierarch ? card.slice(card.indexOf('=') + 1) : card.slice(10));
    let last = i;
    while (typeof value === 'string' && value.endsWith('&') && this.cards[last + 1]?.startsWith('CONTINUE  ')) {
      last++;
      value = value.slice(0, -1) + (stringOf(this.cards[last]!.slice(10)) ?? '');
    }
    if (this.values.has(keyword)) this.duplicates.push(keyword);
    this.values.set(keyword, value);
    return last;
  }
}

const shown = (value: CardValue | undefined): string => (typeof value === 'string' ? `'${quoted(value, 20)}'` : String(value));

export interface HeaderAt {
  readonly header: Header;
  /** first byte after the header's blocks */
  readonly end: number;
}

/** The header that starts at `start`, up to its END card. `place` names it in sentences. */
export function readHeader(bytes: Uint8Array, start: number, place: string, limits: ReadLimits): HeaderAt {
  const endCard = findEnd(bytes, start, place, limits);
  const cards: string[] = [];
  for (let at = start; at < endCard; at += CARD) cards.push(latin1(bytes, at, at + CARD).trimEnd());
  return { header: new Header(cards), end: endOfBlocks(bytes, start, endCard + CARD, place) };
}

/** Where the END card is. Nothing is made of the cards before it is found, for it may never come. */
function findEnd(bytes: Uint8Array, start: number, place: string, limits: ReadLimits): number {
  for (let at = start; ; at += CARD) {
    if (at + CARD > bytes.length)
      refuse(
        'header_truncated',
        `The file is incomplete: it ends inside the header of ${place}, before the END card. Copy or download it again.`,
        { card: 'END' },
      );
    if (isEnd(bytes, at)) return at;
    const count = (at - start) / CARD;
    if (count >= limits.headerCards)
      refuse('header_too_long', `The header of ${place} is too long: no END card within ${limits.headerCards} cards, the limit.`, {
        card: 'END',
      });
    if (!isKeywordField(bytes, at))
      refuse('no_end', `The header of ${place} has no END card: card ${count + 1} is not text. The file is damaged or not FITS.`, {
        card: 'END',
      });
  }
}

/** First byte after the block that holds the END card; all of the block must be there. */
function endOfBlocks(bytes: Uint8Array, start: number, afterEnd: number, place: string): number {
  const end = start + Math.ceil((afterEnd - start) / BLOCK) * BLOCK;
  if (end > bytes.length)
    refuse(
      'header_truncated',
      `The file is incomplete: it ends inside the last block of the header of ${place}. Copy or download it again.`,
    );
  return end;
}

function isEnd(bytes: Uint8Array, at: number): boolean {
  return bytes[at] === 0x45 && bytes[at + 1] === 0x4e && bytes[at + 2] === 0x44 && bytes[at + 3] === 0x20 && bytes[at + 7] === 0x20;
}

/** Keyword fields are printable; the first byte that is not tells that data were reached. */
function isKeywordField(bytes: Uint8Array, at: number): boolean {
  for (let i = at; i < at + 8; i++) if (bytes[i]! < 0x20 || bytes[i]! > 0x7e) return false;
  return true;
}
