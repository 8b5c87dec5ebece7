import { readFileSync } from 'node:fs';
import { lineOf } from '../../../test/support/lines.js';
import { parseDefaultList } from '../linelist/index.js';
import { nebularIntensity } from './nebula.js';

const data = (name: string) => readFileSync(new URL(`../../../seeds/data/${name}`, import.meta.url), 'utf8');
const lines = parseDefaultList(data('lines.csv'), data('telluric.csv')).lines.filter((l) => l.settings.includes('nebular'));
const intensity = nebularIntensity(lines);

/** Intensity of the listed line nearest to a vacuum wavelength, H beta = 100. */
function at(species: string, nm: number): number {
  const k = lines.findIndex((l) => l.species === species && Math.abs(l.wavelengthNm - nm) < 0.03);
  if (k < 0) throw new Error(`${species} ${nm} is not in the list`);
  return 10 ** intensity[k]!;
}
const ratio = (species: string, a: number, b: number) => at(species, a) / at(species, b);

describe('lines of one upper level have fixed ratios', () => {
  // Storey & Zeippen 2000, MNRAS 312, 813
  it('[O III] 500.7 / 495.9: 2.98', () => expect(Math.abs(ratio('O III', 500.824, 496.029) / 2.98 - 1)).toBeLessThan(0.01));
  // the list's transition probabilities (NIST) make it 2.95, 3 % less than theirs
  it('[N II] 658.3 / 654.8: 3.05', () => expect(Math.abs(ratio('N II', 658.527, 654.986) / 3.05 - 1)).toBeLessThan(0.05));
  // Osterbrock & Ferland 2006, from memory: 3.1, on the list's own transition probabilities
  it('[O I] 630.0 / 636.4: 3.1', () => expect(Math.abs(ratio('O I', 630.205, 636.554) / 3.1 - 1)).toBeLessThan(0.05));

  it('whatever other lines are asked with them, as long as the level is whole', () => {
    const pair = lines.filter((l) => l.species === 'O III' && l.type === 'forbidden');
    const alone = nebularIntensity(pair);
    pair.forEach((l, k) => expect(alone[k]).toBe(intensity[lines.indexOf(l)]));
  });
});

describe('recombination lines', () => {
  // Case B at 10^4 K and low density: Storey & Hummer 1995, MNRAS 272, 41; Osterbrock & Ferland 2006, table 4.4 (from memory)
  it('of hydrogen have the decrement 2.86 : 1 : 0.47 : 0.26', () => {
    expect(at('H I', 486.27)).toBeCloseTo(100, 6);
    expect(ratio('H I', 656.46, 486.27)).toBeCloseTo(2.86, 1);
    expect(ratio('H I', 434.17, 486.27)).toBeCloseTo(0.468, 2);
    expect(ratio('H I', 410.29, 486.27)).toBeCloseTo(0.259, 2);
  });

  it('of ionised helium stand on their own scale, a tenth of H beta at 468.6 nm', () => expect(at('He II', 468.7)).toBeCloseTo(10, 6));
});

describe('collisions', () => {
  it('make [O III] and [N II] as bright as they are in H II regions: within a factor of ten of H beta', () => {
    for (const [species, nm] of [
      ['O III', 500.824],
      ['N II', 658.527],
      ['S II', 671.83],
    ] as const) {
      expect(at(species, nm)).toBeGreaterThan(10);
      expect(at(species, nm)).toBeLessThan(1000);
    }
  });

  it('make lines of high levels fainter than those of low ones of the same ion', () =>
    expect(at('O III', 436.444)).toBeLessThan(0.1 * at('O III', 500.824)));

  it('give a permitted metal line without a listed intensity a faint common one, and never less than nothing', () => {
    const [faint] = nebularIntensity([lineOf({ species: 'O II', settings: ['nebular'] })]);
    expect(10 ** faint!).toBeCloseTo(0.158, 2);
    expect(Math.min(...intensity)).toBeGreaterThanOrEqual(-6);
    expect(intensity.every(Number.isFinite)).toBe(true);
  });
});
