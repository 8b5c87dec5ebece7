import { DomainError } from '../../common/errors/domain-error.js';

/** Where a page of a search ended: the value it is ordered by, and the row. */
export interface PageKey {
  readonly value: number;
  readonly id: string;
}

export const writeKey = ({ value, id }: PageKey): string => Buffer.from(JSON.stringify([value, id])).toString('base64url');

/** @throws invalid_request for text that `writeKey` did not write */
export function readKey(text: string): PageKey {
  try {
    const [value, id] = JSON.parse(Buffer.from(text, 'base64url').toString()) as unknown[];
    if (typeof value === 'number' && Number.isFinite(value) && typeof id === 'string' && /^[0-9a-f-]{36}$/.test(id)) return { value, id };
  } catch {
    // no JSON: refused below like any other text that is no key
  }
  throw new DomainError('invalid_request', 'after must be the "next" of a page.', { errors: [{ pointer: '/after', detail: 'is no key' }] });
}
