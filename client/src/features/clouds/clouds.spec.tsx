import type { Cloud, CloudSightline, Column } from '@foreveil/shared';
import { screen } from '@testing-library/react';
import { expect, it } from 'vitest';
import { show } from '../../test/show.js';
import { ColumnTable } from './ColumnTable.js';
import { layOutSky } from './sky.js';
import { SkyChart } from './SkyChart.js';

const column = (logN: number, more: Partial<Column> = {}): Column => ({
  ...{ method: 'apparent-depth', logN, logNSigma: 0.021, apparentLogN: logN, saturated: false, lines: [], sentence: '' },
  ...more,
});
const sightline = (name: string, raDeg: number | null, decDeg: number | null, columns: Record<string, Column> | null): CloudSightline => ({
  ...{ spectrumId: `s ${name}`, spectrumLabel: 'first night', targetId: `t ${name}`, targetName: name, simulated: true, raDeg, decDeg },
  measured: columns && {
    ...{ comparisonId: 'c', comparisonName: 'Two terns', analysisId: 'a', outdated: false },
    components: [
      {
        ...{ velocityKmPerS: -12.4, velocitySigmaKmPerS: 0.07 },
        columns: Object.entries(columns).map(([species, one]) => ({ species, column: one })),
      },
    ],
  },
});
const LIMIT = column(10.4, { method: 'limit', logNSigma: null });
const SIGHTLINES = [
  sightline('Tern 1', 359.5, 20, { 'Na I': column(12.04), 'Ca II': LIMIT }),
  sightline('Tern 2', 0.5, 21, { 'Na I': column(13.1, { saturated: true }) }),
  sightline('Knot 3', null, null, null),
];
const CLOUD: Cloud = {
  ...{ id: 'cloud', programmeId: 'p', name: 'Veil', fromKmPerS: -20, toKmPerS: -5, frame: 'barycentric', notes: '', version: 1 },
  ...{ changedBy: 'Ana Weir', changedAt: '2031-03-15T09:00:00Z', sightlineCount: 3, sightlines: SIGHTLINES },
};

it('shows sightlines against species: values with errors, limits, saturated ones, what is not covered, and what to compare', () => {
  show(<ColumnTable cloud={CLOUD} suggestion={({ targetName }) => `compare ${targetName}`} onRemove={null} />);
  const rows = screen.getAllByRole('row').map((row) => [...row.children].map((cell) => cell.textContent));
  expect(rows).toEqual([
    ['Sightline', 'Velocity, km/s', 'log N(Ca II), cm⁻²', 'log N(Na I), cm⁻²', 'From'],
    ['Tern 1 first night', '−12.400 ± 0.070', '< 10.40', '12.040 ± 0.021', 'Two terns'],
    ['Tern 2 first night', '−12.400 ± 0.070', '—', '> 13.10 saturated', 'Two terns'],
    ['Knot 3 first night', 'compare Knot 3'],
  ]);
});

it('draws east to the left and north up, across 0° of right ascension, with one scale for both directions', () => {
  const sky = layOutSky(SIGHTLINES, { left: 0, right: 300, top: 0, bottom: 200 })!;
  const [one, two] = sky.marks;
  expect(two!.x).toBeLessThan(one!.x);
  expect(two!.y).toBeLessThan(one!.y);
  expect((one!.x - two!.x) / (one!.y - two!.y)).toBeCloseTo(Math.cos((20.5 * Math.PI) / 180), 6);
  for (const { x, y } of sky.marks) expect(x > 0 && x < 300 && y > 0 && y < 200).toBe(true);
  expect(sky.raTicks.length).toBeGreaterThan(1);
  expect(sky.decTicks.length).toBeGreaterThan(1);
});

it('names on the chart what has a position, and beside it what has none', () => {
  show(<SkyChart sightlines={SIGHTLINES} />);
  expect(screen.getByRole('img')).toHaveAccessibleName('Sky chart, ICRS: Tern 1, Tern 2');
  expect(screen.getByText(/Without a position: Knot 3/)).toBeInTheDocument();
});
