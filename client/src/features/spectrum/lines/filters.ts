import { REVIEW_STATES, type ReviewState } from '@foreveil/shared';
import { speciesName } from '../../../lib/species.js';
import { STATE_WORD, type MarkFamily } from '../../../plot/marks.js';
import type { Range } from '../../../plot/view.js';
import { type LineRow } from './reading.js';

export const FAMILIES = ['stellar', 'interstellar', 'nebular', 'telluric', 'unidentified'] as const satisfies readonly MarkFamily[];
export const SORT_KEYS = ['wavelength', 'width', 'fwhm', 'reading', 'velocity', 'probability', 'state'] as const;
export type SortKey = (typeof SORT_KEYS)[number];

/** Which rows the table and the staves show, and in what order the table does. */
export interface LineFilter {
  readonly family: MarkFamily | null;
  readonly state: ReviewState | null;
  /** id of the only system shown */
  readonly system: string | null;
  readonly text: string;
  readonly inView: boolean;
  readonly sort: SortKey;
  readonly descending: boolean;
}

export const NO_FILTER: LineFilter = {
  family: null,
  state: null,
  system: null,
  text: '',
  inView: false,
  sort: 'wavelength',
  descending: false,
};

/** What a search in the table reads: species, wavelengths, state. */
function searchText({ feature, reading, state }: LineRow): string {
  const species = reading.species ? `${reading.species} ${speciesName(reading.species)} ${reading.restNm?.toFixed(4)}` : 'unidentified';
  return `${species} ${feature.wavelengthNm.toFixed(4)} ${STATE_WORD[state]} ${feature.flags.join(' ')}`.toLowerCase();
}

/** Whether a row passes all but the view. */
export function passes(row: LineRow, filter: LineFilter): boolean {
  if (filter.family && row.reading.family !== filter.family) return false;
  if (filter.state && row.state !== filter.state) return false;
  if (filter.system && row.staveId !== filter.system) return false;
  const exactly = /^"(.+)"$/.exec(filter.text.trim())?.[1]; // in quotes: this species and no other
  if (exactly !== undefined) return row.reading.species?.toLowerCase() === exactly.toLowerCase();
  const words = filter.text.toLowerCase().split(/\s+/).filter(Boolean);
  if (words.length === 0) return true;
  const text = searchText(row);
  return words.every((word) => text.includes(word));
}

const isIn = ({ feature }: LineRow, view: Range) => feature.wavelengthNm >= view.fromNm && feature.wavelengthNm <= view.toNm;

const KEY_OF: Record<SortKey, (row: LineRow) => number | string> = {
  wavelength: (r) => r.feature.wavelengthNm,
  width: (r) => r.feature.equivalentWidthNm,
  fwhm: (r) => r.feature.fwhmNm / r.feature.wavelengthNm,
  reading: (r) => r.reading.species ?? '\uffff',
  velocity: (r) => r.reading.velocityKmPerS ?? Infinity,
  probability: (r) => r.reading.probability,
  state: (r) => REVIEW_STATES.indexOf(r.state),
};

/** @param rows ascending in wavelength, which also settles ties */
export function shownRows(rows: readonly LineRow[], filter: LineFilter, view: Range): LineRow[] {
  const kept = rows.filter((row) => passes(row, filter) && (!filter.inView || isIn(row, view)));
  if (filter.sort === 'wavelength') return filter.descending ? kept.reverse() : kept;
  const key = KEY_OF[filter.sort];
  const sign = filter.descending ? -1 : 1;
  return kept
    .map((row) => ({ row, key: key(row) }))
    .sort((a, b) => sign * (a.key < b.key ? -1 : a.key > b.key ? 1 : 0))
    .map(({ row }) => row);
}

export const countInView = (rows: readonly LineRow[], view: Range) => rows.filter((row) => isIn(row, view)).length;

/** The next row still to be decided after `from` (an index of the feature), going round; null when none is left. */
export function nextUndecided(rows: readonly LineRow[], from: number | null, direction: 1 | -1 = 1): LineRow | null {
  const at = rows.findIndex((r) => r.feature.index === from);
  const n = rows.length;
  const start = at < 0 ? (direction > 0 ? -1 : n) : at;
  for (let step = 1; step <= n; step++) {
    const row = rows[(start + direction * step + n * 2) % n];
    if (row && row.state === 'proposed' && row.feature.index !== from) return row;
  }
  return null;
}
