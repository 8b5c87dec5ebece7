import { REVIEW_STATES, SEARCH_ORDERS, type IdentificationQuery } from '@foreveil/shared';
import { MILLIANGSTROM_PER_NM, parseNumber } from '../../lib/number.js';

/** Fields of the search as typed; widths in mÅ, wavelengths in vacuum nm, velocities in km/s. */
export interface SearchForm {
  species: string;
  family: string;
  state: string;
  programmeId: string;
  fromNm: string;
  toNm: string;
  fromKmPerS: string;
  toKmPerS: string;
  fromMilliangstrom: string;
  toMilliangstrom: string;
  withSpecies: string;
  withoutSpecies: string;
  order: string;
}

const NUMBERS = ['fromNm', 'toNm', 'fromKmPerS', 'toKmPerS'] as const;
const WORDS = ['species', 'family', 'state', 'programmeId', 'withSpecies', 'withoutSpecies', 'order'] as const;

export const EMPTY_FORM: SearchForm = {
  ...{ species: '', family: '', state: '', programmeId: '', withSpecies: '', withoutSpecies: '', order: '' },
  ...{ fromNm: '', toNm: '', fromKmPerS: '', toKmPerS: '', fromMilliangstrom: '', toMilliangstrom: '' },
};

/** The search in an address. What an old or mistyped link holds that is no part of a search is left out. */
export function queryOf(params: URLSearchParams): IdentificationQuery {
  const query: Record<string, string | number> = {};
  for (const name of WORDS) {
    const value = params.get(name)?.trim();
    if (value && isWord(name, value)) query[name] = value;
  }
  for (const name of [...NUMBERS, 'fromWidthNm', 'toWidthNm', 'companionKmPerS']) {
    const value = params.get(name);
    if (value !== null && value !== '' && Number.isFinite(Number(value))) query[name] = Number(value);
  }
  return query as IdentificationQuery;
}

function isWord(name: (typeof WORDS)[number], value: string): boolean {
  if (name === 'state') return (REVIEW_STATES as readonly string[]).includes(value);
  if (name === 'order') return (SEARCH_ORDERS as readonly string[]).includes(value);
  if (name === 'programmeId') return /^[0-9a-f-]{36}$/.test(value);
  return value.length <= 40;
}

/** @returns the query, or the first field that holds no number */
export function readForm(form: SearchForm): { query: IdentificationQuery } | { field: keyof SearchForm } {
  const query: Record<string, string | number> = {};
  for (const name of WORDS) if (form[name].trim()) query[name] = form[name].trim();
  for (const name of NUMBERS) {
    if (!form[name].trim()) continue;
    const value = parseNumber(form[name]);
    if (value === null) return { field: name };
    query[name] = value;
  }
  for (const [field, name] of [
    ['fromMilliangstrom', 'fromWidthNm'],
    ['toMilliangstrom', 'toWidthNm'],
  ] as const) {
    if (!form[field].trim()) continue;
    const value = parseNumber(form[field]);
    if (value === null) return { field };
    query[name] = value / MILLIANGSTROM_PER_NM;
  }
  return { query: query as IdentificationQuery };
}

export function formOf(query: IdentificationQuery): SearchForm {
  const form = { ...EMPTY_FORM };
  for (const name of WORDS) form[name] = query[name] ?? '';
  for (const name of NUMBERS) form[name] = query[name] === undefined ? '' : String(query[name]);
  const width = (nm: number | undefined) => (nm === undefined ? '' : String(Number((nm * MILLIANGSTROM_PER_NM).toPrecision(12))));
  return { ...form, fromMilliangstrom: width(query.fromWidthNm), toMilliangstrom: width(query.toWidthNm) };
}
