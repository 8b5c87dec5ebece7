import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { searchText } from '../../lib/queries/search.js';
import { EMPTY_FORM, formOf, queryOf, readForm } from './search-url.js';

describe('a search in an address', () => {
  it('comes back as it was, whatever was asked', () => {
    const number = fc.option(fc.integer({ min: -5000, max: 5000 }), { nil: undefined });
    const word = fc.option(fc.constantFrom('Na I', 'H2O', 'unidentified', 'CH+'), { nil: undefined });
    const query = fc.record({ species: word, withSpecies: word, fromNm: number, toKmPerS: number, fromWidthNm: number });
    fc.assert(
      fc.property(query, (asked) => {
        const set = Object.fromEntries(Object.entries(asked).filter(([, value]) => value !== undefined));
        expect(queryOf(new URLSearchParams(searchText(set)))).toEqual(set);
        expect(readForm(formOf(set))).toEqual({ query: set });
      }),
    );
  });

  it('leaves out what is no part of a search', () => {
    expect(queryOf(new URLSearchParams('state=perhaps&order=name&fromNm=far&programmeId=1&species=Na+I&colour=red'))).toEqual({
      species: 'Na I',
    });
  });
});

describe('the fields', () => {
  it('take widths in mÅ and decimal commas', () => {
    expect(readForm({ ...EMPTY_FORM, fromMilliangstrom: '12,5', fromNm: '589' })).toEqual({ query: { fromWidthNm: 0.00125, fromNm: 589 } });
  });
  it('name the one that holds no number', () => {
    expect(readForm({ ...EMPTY_FORM, toKmPerS: 'fast' })).toEqual({ field: 'toKmPerS' });
  });
});
