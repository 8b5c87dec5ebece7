import { ionisationEnergyEv, logIonFractions, logSolarAbundance, partitionFunction, speciesName } from './ionisation.js';
import { LOG_ABUNDANCE, PARTITION_TEMPERATURES, SPECIES } from './tables.js';

const ELEMENTS = Object.keys(LOG_ABUNDANCE);

describe('partition function', () => {
  it('is tabulated at the tabulated temperatures, between its neighbours elsewhere, and held beyond the ends', () => {
    const row = SPECIES['Fe I']!.slice(1);
    PARTITION_TEMPERATURES.forEach((t, i) => expect(partitionFunction('Fe I', t)).toBeCloseTo(row[i]!, 12));
    // linear in ln T: the middle is the geometric mean of two temperatures
    expect(partitionFunction('Fe I', Math.sqrt(5000 * 5500))).toBeCloseTo(
      (partitionFunction('Fe I', 5000) + partitionFunction('Fe I', 5500)) / 2,
      9,
    );
    expect(partitionFunction('Fe I', 1000)).toBe(row[0]);
    expect(partitionFunction('Fe I', 90_000)).toBe(row.at(-1));
  });

  it('never falls with temperature', () => {
    for (const species of Object.keys(SPECIES))
      for (let i = 1; i < PARTITION_TEMPERATURES.length; i++) {
        const [before, now] = [i - 1, i].map((k) => partitionFunction(species, PARTITION_TEMPERATURES[k]!));
        if (Number.isFinite(now)) expect(now!).toBeGreaterThanOrEqual(before!);
      }
  });

  it('of a bare nucleus is 1, of an unknown species none', () => {
    expect(['H II', 'He III'].map((s) => partitionFunction(s, 9000))).toEqual([1, 1]);
    expect(partitionFunction('Xx I', 9000)).toBeNaN();
    expect(ionisationEnergyEv('Xx I')).toBeNaN();
  });
});

describe('ion fractions', () => {
  it('add to one for every element, at every temperature and density', () => {
    for (const element of ELEMENTS)
      for (const t of [3000, 6000, 12_000, 30_000])
        for (const logNe of [10, 14]) expect(logIonFractions(element, t, logNe).reduce((sum, l) => sum + 10 ** l, 0)).toBeCloseTo(1, 12);
  });

  it('move to higher stages with temperature, and back with density', () => {
    const mean = (t: number, logNe: number) => logIonFractions('Fe', t, logNe).reduce((sum, l, stage) => sum + stage * 10 ** l, 0);
    for (let t = 3000; t < 29_000; t += 500) expect(mean(t + 500, 13)).toBeGreaterThan(mean(t, 13));
    expect(mean(9000, 15)).toBeLessThan(mean(9000, 13));
  });

  // textbook knowledge (e.g. Gray, The Observation and Analysis of Stellar Photospheres, ch. 1 and 8)
  it('have hydrogen neutral in the Sun and ionised in a hot star; sodium and calcium ionised in the Sun, helium neutral', () => {
    const neutral = (element: string, t: number, logNe: number) => 10 ** logIonFractions(element, t, logNe)[0]!;
    expect(neutral('H', 5800, 13.5)).toBeGreaterThan(0.99);
    expect(neutral('H', 25_000, 14)).toBeLessThan(0.01);
    expect(neutral('Na', 5800, 13.5)).toBeLessThan(0.01);
    expect(neutral('Ca', 5800, 13.5)).toBeLessThan(0.01);
    expect(neutral('He', 10_000, 14)).toBeGreaterThan(0.99);
  });
});

describe('abundances and names', () => {
  it('are those of the Sun: hydrogen 12, iron 7.50 (Asplund et al. 2009)', () => {
    expect(logSolarAbundance('H')).toBe(0);
    expect(logSolarAbundance('Fe')).toBeCloseTo(-4.5, 9);
    expect(logSolarAbundance('Xx')).toBeNaN();
  });

  it('stages are counted from I', () => expect([1, 2, 6, 7].map((s) => speciesName('Fe', s))).toEqual(['Fe I', 'Fe II', 'Fe VI', 'Fe ?']));
});
