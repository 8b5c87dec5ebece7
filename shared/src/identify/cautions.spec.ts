import type { Analysis, Candidate, Feature } from './analysis.js';
import { cautionsOf } from './cautions.js';

type Facts = Omit<Analysis, 'cautions'>;
const reading = (more: Partial<Candidate>) =>
  ({ species: 'Na I', family: 'interstellar', share: 0.9, probability: 0.9, ...more }) as Candidate;
const feature = (more: Partial<Feature>) =>
  ({ wavelengthNm: 500, flags: [], candidates: [reading({})], unidentifiedProbability: 0.02, ...more }) as unknown as Feature;
const analysis = (more: Partial<Facts> = {}) =>
  ({
    continuum: { constrained: true, statement: 'The temperature is constrained.' },
    frame: 'barycentric',
    resolvingPower: 40_000,
    resolvingPowerHow: 'stated',
    noiseHow: 'stated',
    systems: [],
    features: [feature({})],
    ...more,
  }) as Facts;

describe('cautions', () => {
  it('are none where nothing calls for one', () => expect(cautionsOf(analysis())).toEqual([]));

  it.each<[string, Partial<Facts>, RegExp]>([
    [
      'a temperature that the continuum does not hold',
      { continuum: { constrained: false, statement: 'Not constrained.' } as Facts['continuum'] },
      /^Not constrained\.$/,
    ],
    ['an unknown frame', { frame: 'unknown' }, /frame is unknown/],
    ['an estimated resolving power', { resolvingPowerHow: 'estimated', resolvingPower: 19_876.4 }, /not stated; 19876 was estimated/],
    ['estimated errors', { noiseHow: 'estimated' }, /gives no errors/],
    ['rescaled errors', { noiseHow: 'stated_rescaled' }, /rescaled/],
    ['one saturated feature', { features: [feature({ flags: ['saturated'] })] }, /^1 feature is saturated/],
    [
      'several saturated features',
      { features: [feature({ flags: ['saturated'] }), feature({ flags: ['saturated'] })] },
      /^2 features are saturated/,
    ],
    [
      'features without a reading',
      { features: [feature({}), feature({ candidates: [], unidentifiedProbability: 1 })] },
      /^1 of 2 features/,
    ],
    ['a reading that is less likely than none', { features: [feature({ unidentifiedProbability: 0.95 })] }, /^1 of 1 features/],
  ])('name %s', (_, facts, sentence) => {
    const cautions = cautionsOf(analysis(facts));
    expect(cautions).toHaveLength(1);
    expect(cautions[0]).toMatch(sentence);
  });

  describe('of the air at the sodium doublet', () => {
    const air = { systems: [{ family: 'telluric' }] as unknown as Facts['systems'] };
    const blended = feature({
      wavelengthNm: 589.1,
      candidates: [reading({}), reading({ species: 'H2O', family: 'telluric', share: 0.2 })],
    });
    const touched = (facts: Partial<Facts>) => cautionsOf(analysis({ ...air, ...facts })).filter((c) => c.includes('Na I D'));

    it('are given where its lines take part in a sodium line', () => {
      expect(touched({ features: [blended] })).toEqual([
        expect.stringMatching(/^Water or oxygen of the Earth's air takes part in 1 feature at Na I D/),
      ]);
      expect(touched({ features: [blended, blended] })).toEqual([expect.stringContaining('2 features')]);
    });

    it('are not given where it takes no part, elsewhere, for other species, or without air', () => {
      expect(touched({ features: [feature({ wavelengthNm: 589.1 })] })).toEqual([]);
      expect(touched({ features: [{ ...blended, wavelengthNm: 600 }] })).toEqual([]);
      expect(touched({ features: [{ ...blended, candidates: [reading({ species: 'Fe I' }), ...blended.candidates.slice(1)] }] })).toEqual(
        [],
      );
      expect(cautionsOf(analysis({ features: [blended] }))).toEqual([]);
    });
  });
});
