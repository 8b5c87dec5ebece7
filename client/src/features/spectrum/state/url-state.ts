import { REVIEW_STATES, type Medium, type WavelengthUnit } from '@foreveil/shared';
import type { Base, CurveMode } from '../../../plot/value-domain.js';
import type { Range } from '../../../plot/view.js';
import { FAMILIES, NO_FILTER, SORT_KEYS, type LineFilter } from '../lines/filters.js';

/** All of a view that a link restores. */
export interface PageState {
  readonly unit: WavelengthUnit;
  readonly medium: Medium;
  readonly mode: CurveMode;
  readonly base: Base;
  readonly filter: LineFilter;
  /** vacuum nm of the selected feature: survives a re-run, which an index would not */
  readonly lineNm: number | null;
  /** null: chosen by the page */
  readonly range: Range | null;
}

export const START: PageState = { unit: 'nm', medium: 'vacuum', mode: 'flux', base: 'zero', filter: NO_FILTER, lineNm: null, range: null };

const UNITS = ['nm', 'angstrom', 'micron', 'wavenumber', 'terahertz', 'electronvolt'] as const satisfies readonly WavelengthUnit[];
const MEDIA = ['vacuum', 'air'] as const satisfies readonly Medium[];
const MODES = ['flux', 'normalised'] as const satisfies readonly CurveMode[];
const BASES = ['zero', 'close'] as const satisfies readonly Base[];

function oneOf<T extends string>(allowed: readonly T[], value: string | null): T | null {
  return allowed.find((a) => a === value) ?? null;
}

function positive(value: string | null): number | null {
  const n = value === null || value.trim() === '' ? NaN : Number(value);
  return Number.isFinite(n) && n > 0 ? n : null;
}

/** Reads a query string; a value that makes no sense counts as left out. `fallback` holds what the person last used. */
export function readPageState(query: URLSearchParams, fallback: Pick<PageState, 'unit' | 'medium'> = START): PageState {
  const [from, to] = [positive(query.get('from')), positive(query.get('to'))];
  const [sort, order] = (query.get('sort') ?? '').split('.');
  return {
    unit: oneOf(UNITS, query.get('unit')) ?? fallback.unit,
    medium: oneOf(MEDIA, query.get('medium')) ?? fallback.medium,
    mode: oneOf(MODES, query.get('view')) ?? START.mode,
    base: oneOf(BASES, query.get('base')) ?? START.base,
    lineNm: positive(query.get('line')),
    range: from !== null && to !== null && to > from ? { fromNm: from, toNm: to } : null,
    filter: {
      family: oneOf(FAMILIES, query.get('family')),
      state: oneOf(REVIEW_STATES, query.get('state')),
      system: query.get('system'),
      text: query.get('find') ?? '',
      inView: query.get('inview') === '1',
      sort: oneOf(SORT_KEYS, sort ?? null) ?? NO_FILTER.sort,
      descending: order === 'down',
    },
  };
}

/** The inverse, shortest form: what is as at the start is left out. Unit and medium are always written, so a link shows what its sender saw. */
export function writePageState({ unit, medium, mode, base, filter, lineNm, range }: PageState): URLSearchParams {
  const query = new URLSearchParams();
  const put = (name: string, value: string | null | false) => void (value && query.set(name, value));
  put('from', range && range.fromNm.toFixed(4));
  put('to', range && range.toNm.toFixed(4));
  put('line', lineNm !== null && lineNm.toFixed(5));
  put('unit', unit);
  put('medium', medium);
  put('view', mode !== START.mode && mode);
  put('base', base !== START.base && base);
  put('family', filter.family);
  put('state', filter.state);
  put('system', filter.system);
  put('find', filter.text);
  put('inview', filter.inView && '1');
  const sorted = filter.sort !== NO_FILTER.sort || filter.descending;
  put('sort', sorted && `${filter.sort}${filter.descending ? '.down' : ''}`);
  return query;
}
