import { readFileSync } from 'node:fs';
import { DEFAULT_LIST_NAME, DEFAULT_LIST_VERSION, parseDefaultList } from './parse-default.js';

const HEAD =
  'id,species,element,ion_stage,wavelength_vac_nm,wavelength_air_nm,type,e_low_cm1,e_up_cm1,j_low,j_up,log_gf,f_lu,a_ki_s1,grade,fwhm_nm,setting,multiplet_key,source,verified,tier,rel_intensity,rel_intensity_scale,rel_intensity_note,notes';
const SODIUM =
  'NaI-589.5924,Na I,Na,1,589.755814,589.592424,allowed,0.0000,16956.1703,1/2,1/2,-0.194,3.2e-01,6.14e+07,AA,,stellar;interstellar,Na I: 3s - 3p,NIST ASD,two sources,1,,,,';
const BAND = 'DIB-578.05,DIB,,,578.21,578.05,band,,,,,,,,,0.21,interstellar,,memory,,1,610,mA_per_mag,,carrier unknown';
const SKY = 'OI-557.7,O I,O,1,557.8887,557.7339,sky,15867.862,33792.583,2,0,,,1.26,,,sky;nebular,,NIST ASD,,2,100,sky_photons,,';
const AIR_HEAD = 'feature,species,kind,start_air_nm,end_air_nm,wavelength_vac_nm,wavelength_air_nm,strength,source,verified,notes';
const EXTENT = 'O2 A band,O2,band,759.30,772.00,,,,memory,,head';
const WATER = 'H2O D,H2O,line,,,589.0,588.836700,,memory,,';
const OXYGEN = 'O2 B band,O2,line,,,687.0,686.810489,0.45,computed,,';
const parse = (rows: string[], air: string[] = []) => parseDefaultList([HEAD, ...rows].join('\n'), [AIR_HEAD, ...air].join('\n'));

describe('a row of the list', () => {
  it('becomes a line with its numbers and its source', () => {
    expect(parse([SODIUM]).lines).toEqual([
      {
        id: 'NaI-589.5924',
        species: 'Na I',
        element: 'Na',
        ionStage: 1,
        wavelengthNm: 589.755814,
        type: 'allowed',
        lowerEnergyPerCm: 0,
        upperEnergyPerCm: 16956.1703,
        lowerJ: 0.5,
        upperJ: 0.5,
        logGf: -0.194,
        oscillatorStrength: 0.32,
        einsteinA: 6.14e7,
        bandFwhmNm: null,
        settings: ['stellar', 'interstellar'],
        multiplet: 'Na I: 3s - 3p',
        relativeIntensity: null,
        relativeIntensityScale: '',
        tier: 1,
        source: 'NIST ASD',
      },
    ]);
  });

  it('leaves null what it leaves blank', () => {
    const [band] = parse([BAND]).lines;
    expect(band).toMatchObject({
      element: '',
      ionStage: 0,
      lowerEnergyPerCm: null,
      logGf: null,
      lowerJ: null,
      bandFwhmNm: 0.21,
      relativeIntensity: 610,
    });
  });

  it('counts the night sky to the air, and keeps the other settings', () => {
    expect(parse([SKY]).lines[0]).toMatchObject({ settings: ['telluric', 'nebular'], lowerJ: 2, upperJ: 0, tier: 2 });
  });
});

describe('a row of the air', () => {
  it('becomes a line with an id of its own; extents of bands do not', () => {
    const { lines } = parse([], [EXTENT, WATER, OXYGEN]);
    expect(lines.map(({ id }) => id)).toEqual(['H2O-588.8367', 'O2-686.8105']);
    expect(lines[0]).toMatchObject({ type: 'telluric', settings: ['telluric'], relativeIntensity: null, relativeIntensityScale: '' });
    expect(lines[1]).toMatchObject({ relativeIntensity: 0.45, relativeIntensityScale: 'telluric O2 B band', multiplet: 'O2 B band' });
  });
});

it('puts lines of both files in order of vacuum wavelength, equal ones as they stand', () => {
  const same = SODIUM.replace('NaI-589.5924', 'second');
  const { lines } = parse([SODIUM, same, BAND, SKY], [OXYGEN, WATER]);
  expect(lines.map(({ id }) => id)).toEqual(['OI-557.7', 'DIB-578.05', 'H2O-588.8367', 'NaI-589.5924', 'second', 'O2-686.8105']);
});

it('carries name and version', () => expect(parse([])).toEqual({ name: DEFAULT_LIST_NAME, version: DEFAULT_LIST_VERSION, lines: [] }));

describe('the list as delivered', () => {
  const data = (name: string) => readFileSync(new URL(`../../../seeds/data/${name}`, import.meta.url), 'utf8');
  const { lines } = parseDefaultList(data('lines.csv'), data('telluric.csv'));
  const count = (of: (line: (typeof lines)[number]) => boolean) => lines.filter(of).length;

  it('has its lines, by family and by kind', () => {
    expect(lines).toHaveLength(12_423 + 481);
    const families = (['stellar', 'interstellar', 'nebular', 'telluric'] as const).map((f) => count((l) => l.settings.includes(f)));
    expect(families).toEqual([11_607, 527, 762, 607]);
    const kinds = ['allowed', 'forbidden', 'molecular', 'band', 'sky', 'telluric'].map((t) => count((l) => l.type === t));
    expect(kinds).toEqual([11_651, 457, 37, 174, 104, 481]);
    expect(kinds.reduce((a, b) => a + b)).toBe(lines.length);
  });

  it('names a source on every line', () => expect(count(({ source }) => source.trim() === '')).toBe(0));

  it('has finite numbers or none: no text slipped into a column of numbers', () => {
    const numbers = (l: (typeof lines)[number]) => [
      l.wavelengthNm,
      l.ionStage,
      l.lowerEnergyPerCm,
      l.upperEnergyPerCm,
      l.lowerJ,
      l.upperJ,
      l.logGf,
      l.oscillatorStrength,
      l.einsteinA,
      l.bandFwhmNm,
      l.relativeIntensity,
    ];
    expect(lines.filter((l) => numbers(l).some((v) => v !== null && !Number.isFinite(v)))).toEqual([]);
    expect(count((l) => !(l.wavelengthNm > 10 && l.wavelengthNm < 100_000))).toBe(0);
  });

  it('gives atoms an element and a stage that their name has, and molecules none', () => {
    const wrong = lines.filter(({ species, element, ionStage }) => {
      const atom = /^([A-Z][a-z]?) ([IV]+)$/.exec(species);
      return atom ? atom[1] !== element || ['I', 'II', 'III', 'IV', 'V', 'VI'].indexOf(atom[2]!) + 1 !== ionStage : ionStage !== 0;
    });
    expect(wrong.map(({ id }) => id)).toEqual([]);
  });

  it('says on which scale a relative intensity stands', () =>
    expect(count((l) => l.relativeIntensity !== null && l.relativeIntensityScale === '')).toBe(0));
});
