import {
  changedSettings,
  completeSettings,
  DEFAULT_SETTINGS,
  settingsDifference,
  settingsInWords,
  settingsProblems,
  type AnalysisSettings,
} from './index.js';

/** Every setting away from its default. */
const EVERYTHING: AnalysisSettings = {
  falseFeatures: 2,
  extinctionAv: 1.24,
  extinctionLaw: 'fitzpatrick99',
  extinctionRv: 4,
  localContinuum: true,
  temperatureK: 12_000,
  temperatureUse: 'strengths_and_continuum',
  velocityRangeKmPerS: 500,
  setSystems: [{ family: 'interstellar', velocityKmPerS: -12.5, toleranceKmPerS: 1 }],
  forbiddenSystems: [{ family: 'stellar', fromKmPerS: -300, toKmPerS: -100 }],
  onlySpecies: ['Na I', 'CH+'],
  withoutSpecies: ['Fe I'],
  alsoSpecies: [{ species: 'V II', family: 'interstellar' }],
  maskedRegions: [{ fromNm: 500, toNm: 501 }],
  continuumMoves: [{ fromNm: 510, toNm: 512, factor: 1.02 }],
  addedFeatures: [{ kind: 'dip', wavelengthNm: 505, fwhmNm: null }],
  splitFeatures: [{ kind: 'dip', wavelengthNm: 506 }],
  removedFeatures: [{ kind: 'peak', wavelengthNm: 507 }],
};

describe('settings', () => {
  it('are complete with what was left out at its default, and without what no version knows', () => {
    expect(completeSettings({})).toEqual(DEFAULT_SETTINGS);
    expect(completeSettings({ falseFeatures: 3, ...({ colour: 'green' } as object) })).toEqual({ ...DEFAULT_SETTINGS, falseFeatures: 3 });
    expect(completeSettings(EVERYTHING)).toEqual(EVERYTHING);
  });

  it('are right when left out, at their defaults, and all set at once', () => {
    for (const given of [{}, DEFAULT_SETTINGS, EVERYTHING]) expect(settingsProblems(given)).toEqual([]);
  });

  it.each<[string, unknown, string, RegExp]>([
    ['no settings at all', null, '', /object/],
    ['an unknown one', { colour: 1 }, '/colour', /no setting/],
    ['text for a number', { falseFeatures: '2' }, '/falseFeatures', /number from 0.001 to 1000/],
    ['no number', { falseFeatures: NaN }, '/falseFeatures', /number/],
    ['negative dust', { extinctionAv: -1 }, '/extinctionAv', /0 to 50 mag/],
    ['an unknown law', { extinctionLaw: 'mine' }, '/extinctionLaw', /ccm89, odonnell94, fitzpatrick99/],
    ['R_V of no dust', { extinctionRv: 0 }, '/extinctionRv', /2 to 6/],
    ['a cold star', { temperatureK: 3 }, '/temperatureK', /1000 to 200000 K/],
    ['a mask the wrong way round', { maskedRegions: [{ fromNm: 5, toNm: 4 }] }, '/maskedRegions/0/toNm', /larger/],
    ['half a mask', { maskedRegions: [{ fromNm: 5 }] }, '/maskedRegions/0/toNm', /number/],
    ['a stranger in a mask', { maskedRegions: [{ fromNm: 5, toNm: 6, why: 'x' }] }, '/maskedRegions/0/why', /not known/],
    ['a continuum of nothing', { continuumMoves: [{ fromNm: 5, toNm: 6, factor: 0 }] }, '/continuumMoves/0/factor', /0.05 to 20/],
    [
      'an unknown family',
      { setSystems: [{ family: 'galactic', velocityKmPerS: 0, toleranceKmPerS: 1 }] },
      '/setSystems/0/family',
      /one of/,
    ],
    ['a species that is code', { onlySpecies: ['<b>'] }, '/onlySpecies/0', /Ca II/],
    ['a list that is none', { addedFeatures: {} }, '/addedFeatures', /list/],
    ['201 masks', { maskedRegions: Array(201).fill({ fromNm: 5, toNm: 6 }) }, '/maskedRegions', /200/],
    ['both wanted and left out', { onlySpecies: ['Na I'], withoutSpecies: ['Na I'] }, '/withoutSpecies/0', /also among/],
    [
      'set where it is forbidden',
      {
        setSystems: [{ family: 'stellar', velocityKmPerS: 5, toleranceKmPerS: 1 }],
        forbiddenSystems: [{ family: 'stellar', fromKmPerS: 0, toKmPerS: 9 }],
      },
      '/setSystems/0/velocityKmPerS',
      /forbidden/,
    ],
  ])('are refused with %s, saying where and why', (_, given, pointer, detail) => {
    const [first, ...others] = settingsProblems(given);
    expect(first).toMatchObject({ pointer, detail: expect.stringMatching(detail) as string });
    expect(others).toEqual([]);
  });

  it('say in words what they change, one sentence a value, and nothing at their defaults', () => {
    expect(settingsInWords(DEFAULT_SETTINGS)).toEqual([]);
    const words = settingsInWords(EVERYTHING);
    const silent = changedSettings(EVERYTHING).filter((key) => !words.some((w) => w.key === key));
    expect(silent).toEqual(['temperatureUse']); // told with the temperature
    expect(words.map(({ sentence }) => sentence)).toEqual(
      expect.arrayContaining([
        '500 nm to 501 nm is masked: no fit uses it and no feature is found there.',
        'Dust is set to A_V = 1.24 mag, E(B−V) = 0.310 mag.',
        'The continuum from 510 nm to 512 nm is moved by +2 %.',
        'A system of the interstellar gas is set at −12.5 ± 1 km/s, found or not.',
      ]),
    );
  });

  it('say what differs between two runs, both ways', () => {
    const other = { ...EVERYTHING, localContinuum: false, maskedRegions: [{ fromNm: 600, toNm: 601 }] };
    const { gone, fresh } = settingsDifference(EVERYTHING, other);
    expect(gone.map((s) => s.split(' ')[0])).toEqual(['500', 'The']);
    expect(fresh).toEqual(['600 nm to 601 nm is masked: no fit uses it and no feature is found there.']);
    expect(settingsDifference(other, other)).toEqual({ gone: [], fresh: [] });
  });
});
