import { execFile } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { promisify } from 'node:util';
import { C_KM_PER_S, type Analysis } from '@foreveil/shared';
import { furtherExplained, isRight, matched, trueFeatures, type TrueFeature, type TrueLine } from '../support/scoring.js';

// The spectra of the demonstration are simulated, and what went into each lies in test/fixtures/truth. The analysis, with the settings and
// the list that everybody gets, is held against it. Floors are for all six together: one spectrum has too few features for a percentage.

interface TrueSystem {
  readonly id: string;
  readonly family: string;
  readonly velocity_km_s: number;
  /** rotation, km/s */
  readonly vsini?: number;
}
interface Truth {
  readonly file: string;
  readonly resolving_power: number;
  readonly systems: readonly TrueSystem[];
  readonly lines: readonly TrueLine[];
}

const TRUTHS = 'test/fixtures/truth';
const truths = readdirSync(TRUTHS).map((name) => JSON.parse(readFileSync(`${TRUTHS}/${name}`, 'utf8')) as Truth);
/** An analysis for each file, or why it was refused. */
async function analysed(files: readonly string[]): Promise<(Analysis | string)[]> {
  const options = ['--import', 'tsx', '--conditions=foreveil-source', 'test/support/analyse-files.ts'];
  const { stdout } = await promisify(execFile)(process.execPath, [...options, ...files], { maxBuffer: 2 ** 28 });
  return stdout
    .trim()
    .split('\n')
    .map((line) => JSON.parse(line) as Analysis | string);
}

const DUE = 8; // sigma: features that must be found
const NAMED = 5; // sigma: features that, once found, must be named
const SURE = 0.95;

/** Whose line dominates a feature. */
const ownerOf = ({ lines }: TrueFeature) => lines.reduce((a, b) => (Math.abs(b.ew_nm) > Math.abs(a.ew_nm) ? b : a)).system;

/** Systems that a perfect analysis could tell: they dominate two due features, and none of their family is within a resolution element. */
function identifiable({ systems, resolving_power }: Truth, due: readonly TrueFeature[]): TrueSystem[] {
  const alone = (s: TrueSystem) =>
    systems.every(
      (o) => o === s || o.family !== s.family || Math.abs(o.velocity_km_s - s.velocity_km_s) >= (0.8 * C_KM_PER_S) / resolving_power,
    );
  return systems.filter((s) => alone(s) && due.filter((feature) => ownerOf(feature) === s.id).length >= 2);
}

function hits({ systems }: Analysis, { family, velocity_km_s, vsini = 0 }: TrueSystem, resolvingPower: number): boolean {
  const mostSigma = (0.1 * C_KM_PER_S) / resolvingPower + 0.05 * vsini;
  return systems.some(
    (s) =>
      s.family === family && Math.abs(s.velocityKmPerS - velocity_km_s) <= Math.max(1.5, 3 * Math.min(s.velocitySigmaKmPerS, mostSigma)),
  );
}

function countsOf(truth: Truth, analysis: Analysis) {
  const reported = analysis.features.filter(({ flags }) => !flags.includes('cosmic'));
  const features = trueFeatures(truth.lines);
  const pairs = matched(reported, features);
  const seen = new Set(pairs.values());
  const due = features.filter(({ snr, covered }) => snr >= DUE && covered);
  const asked = [...pairs].filter(([, { snr, main }]) => snr >= NAMED && main.some(({ listed }) => listed));
  const named = asked.map(
    ([
      {
        candidates: [first],
      },
      feature,
    ]) => ({ first, feature, right: isRight(first, feature) }),
  );
  const sure = named.filter(({ first }) => (first?.probability ?? 0) >= SURE);
  const systems = identifiable(truth, due);
  return {
    due: due.length,
    found: due.filter((feature) => seen.has(feature)).length,
    reported: reported.length,
    explained: pairs.size + furtherExplained(reported, pairs, truth.lines),
    named: named.length,
    right: named.filter(({ right }) => right).length,
    rightFamily: named.filter(
      ({ first, feature, right }) =>
        right && feature.main.some((l) => isRight(first, { ...feature, main: [l] }) && l.setting === first!.family),
    ).length,
    sure: sure.length,
    wrongWhenSure: sure.filter(({ right }) => !right).length,
    systems: systems.length,
    systemsFound: systems.filter((s) => hits(analysis, s, truth.resolving_power)).length,
  };
}
type Counts = ReturnType<typeof countsOf>;

describe('identification of the simulated spectra', () => {
  let analyses: (Analysis | string)[];
  let counts: Counts[];
  beforeAll(async () => {
    analyses = await analysed(truths.map(({ file }) => `seeds/data/spectra/${file}`));
    counts = truths.flatMap((truth, i) => {
      const analysis = analyses[i]!;
      return typeof analysis === 'string' ? [] : [countsOf(truth, analysis)];
    });
  }, 180_000);
  const all = (key: keyof Counts) => counts.reduce((sum, one) => sum + one[key], 0);

  it('refuses none of the six', () => {
    expect(truths).toHaveLength(6);
    expect(analyses.filter((a) => typeof a === 'string')).toEqual([]);
  });

  it('asks enough for percentages to mean something', () => {
    expect(all('due')).toBeGreaterThan(500);
    expect(all('named')).toBeGreaterThan(500);
    expect(all('systems')).toBeGreaterThanOrEqual(10);
  });

  it('finds 95 of 100 features above 8 sigma', () => expect(all('found') / all('due')).toBeGreaterThanOrEqual(0.95));
  it('reports features of which 90 in 100 are there', () => expect(all('explained') / all('reported')).toBeGreaterThanOrEqual(0.9));
  it('puts the right line first in 95 of 100', () => expect(all('right') / all('named')).toBeGreaterThanOrEqual(0.95));
  it('puts right lines in the right family', () => expect(all('rightFamily') / all('right')).toBeGreaterThanOrEqual(0.98));

  it('means it when it is sure: of readings at 0.95 or more, at most 2 in 100 are wrong', () => {
    expect(all('sure')).toBeGreaterThan(0.8 * all('named'));
    expect(all('wrongWhenSure') / all('sure')).toBeLessThanOrEqual(0.02);
  });

  it('finds the velocity systems within 1.5 km/s or 3 sigma', () => expect(all('systemsFound')).toBe(all('systems')));
});
