import type { ReactNode } from 'react';
import { fixed, MILLIANGSTROM_PER_NM, probability, type NumberParts } from '../../../lib/number.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { shownPerNm } from '../../../plot/axis-ticks.js';
import { Mark } from '../../../plot/Mark.js';
import { STATE_WORD } from '../../../plot/marks.js';
import { readingName, widthKmPerS } from '../evidence/claim-text.js';
import { columnParts } from '../format.js';
import type { SortKey } from './filters.js';
import type { LineRow } from './reading.js';
import classes from './lines.module.css';

export interface Column {
  readonly key: SortKey | 'mark';
  readonly title: (display: WavelengthDisplay) => string;
  /** numbers stand right-aligned */
  readonly number: boolean;
  /** shown where the pane has at least this many CSS px */
  readonly from: number;
  /** track of the grid */
  readonly width: string;
  readonly cell: (row: LineRow, display: WavelengthDisplay) => ReactNode;
  /** full precision, for copying; null: not copied */
  readonly plain: ((row: LineRow, display: WavelengthDisplay) => readonly (string | number | null)[]) | null;
  readonly plainTitles: (display: WavelengthDisplay) => readonly string[];
}

function WithError({ value, sigma }: NumberParts) {
  return (
    <>
      <span className={classes.value}>{value}</span>
      <span className={classes.error}>{sigma === null ? '' : `± ${sigma}`}</span>
    </>
  );
}

/** Decimals that most errors of a wavelength need, in the shown unit. */
const wavelengthColumnDecimals = ({ unit }: WavelengthDisplay) =>
  ({ nm: 5, angstrom: 4, micron: 8, wavenumber: 3, terahertz: 5, electronvolt: 8 })[unit];

export const COLUMNS: readonly Column[] = [
  {
    key: 'mark',
    title: () => '',
    number: false,
    from: 0,
    width: '28px',
    cell: (row) => <Mark family={row.reading.family} state={row.state} spoken />,
    plain: null,
    plainTitles: () => [],
  },
  {
    key: 'wavelength',
    title: (display) => (display.unit === 'wavenumber' ? 'σ, cm⁻¹' : `λ, ${display.unitLabel}`),
    number: true,
    from: 0,
    width: '142px',
    cell: ({ feature }, display) => {
      const sigma = feature.wavelengthSigmaNm * shownPerNm(feature.wavelengthNm, display);
      return <WithError {...columnParts(display.show(feature.wavelengthNm), sigma, wavelengthColumnDecimals(display))} />;
    },
    plain: ({ feature }, display) => [
      display.show(feature.wavelengthNm),
      feature.wavelengthSigmaNm * shownPerNm(feature.wavelengthNm, display),
    ],
    plainTitles: (display) => [`wavelength (${display.shortLabel})`, `error (${display.unitLabel})`],
  },
  {
    key: 'width',
    title: () => 'W, mÅ',
    number: true,
    from: 0,
    width: '112px',
    cell: ({ feature }) => (
      <WithError
        {...columnParts(feature.equivalentWidthNm * MILLIANGSTROM_PER_NM, feature.equivalentWidthSigmaNm * MILLIANGSTROM_PER_NM, 1)}
      />
    ),
    plain: ({ feature }) => [feature.equivalentWidthNm * MILLIANGSTROM_PER_NM, feature.equivalentWidthSigmaNm * MILLIANGSTROM_PER_NM],
    plainTitles: () => ['W (mA, positive in absorption)', 'error (mA)'],
  },
  {
    key: 'fwhm',
    title: () => 'FWHM, km/s',
    number: true,
    from: 630,
    width: '78px',
    cell: ({ feature }) => {
      const width = widthKmPerS(feature);
      return fixed(width, width < 30 ? 1 : 0) + (width < 30 ? '' : '\u2007\u2005');
    },
    plain: ({ feature }) => [widthKmPerS(feature)],
    plainTitles: () => ['FWHM (km/s)'],
  },
  {
    key: 'reading',
    title: () => 'Reading',
    number: false,
    from: 0,
    width: 'minmax(98px, 1fr)',
    cell: ({ reading }, display) => readingName(reading, display),
    plain: ({ reading }, display) => [reading.species ?? 'unidentified', reading.restNm === null ? null : display.show(reading.restNm)],
    plainTitles: (display) => ['species', `rest wavelength (${display.shortLabel})`],
  },
  {
    key: 'velocity',
    title: () => 'v, km/s',
    number: true,
    from: 552,
    width: '104px',
    cell: ({ reading }) => <WithError {...columnParts(reading.velocityKmPerS, reading.velocitySigmaKmPerS, 2, true)} />,
    plain: ({ reading }) => [reading.velocityKmPerS, reading.velocitySigmaKmPerS],
    plainTitles: () => ['velocity (km/s)', 'error (km/s)'],
  },
  {
    key: 'probability',
    title: () => 'P',
    number: true,
    from: 0,
    width: '58px',
    cell: ({ reading }) => probability(reading.probability),
    plain: ({ reading }) => [reading.probability],
    plainTitles: () => ['probability'],
  },
  {
    key: 'state',
    title: () => 'State',
    number: false,
    from: 700,
    width: '72px',
    cell: ({ state }) => STATE_WORD[state],
    plain: ({ state }) => [STATE_WORD[state]],
    plainTitles: () => ['state'],
  },
];

/** Columns for which a pane has room. */
export const columnsFor = (paneWidth: number) => COLUMNS.filter((c) => c.from <= paneWidth);

/** Twelve digits: all that a measurement has, without the tail of binary fractions. */
const plainText = (v: string | number | null) => (v === null ? '' : typeof v === 'number' ? String(Number(v.toPrecision(12))) : v);

/** The rows as tab-separated text with a header that names units, at full precision. */
export function asTsv(rows: readonly LineRow[], display: WavelengthDisplay): string {
  const copied = COLUMNS.filter((c) => c.plain !== null);
  const head = copied.flatMap((c) => c.plainTitles(display));
  const body = rows.map((row) => copied.flatMap((c) => c.plain!(row, display)).map(plainText));
  return [head, ...body].map((line) => line.join('\t')).join('\n');
}
