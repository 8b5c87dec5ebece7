import type { AxisUnit, ReadingCorrections, ReadProblem } from '@foreveil/shared';

/** Options of the command line that answer what a file leaves open, with the correction each one makes. */
const FLAGS = {
  part: 'place',
  'wavelength-column': 'wavelengthColumn',
  'flux-column': 'fluxColumn',
  'error-column': 'uncertaintyColumn',
  'axis-unit': 'axisUnit',
  'rest-wavelength': 'restWavelengthNm',
  delimiter: 'delimiter',
} as const satisfies Record<string, keyof ReadingCorrections>;
type Flag = keyof typeof FLAGS;
const NAMES = Object.keys(FLAGS) as Flag[];

export const ANSWER_OPTIONS = Object.fromEntries(NAMES.map((name) => [name, { type: 'string' }])) as Record<Flag, { type: 'string' }>;

const AXIS_UNITS: readonly AxisUnit[] = [
  ...(['m', 'nm', 'angstrom', 'micron', 'wavenumber_per_cm', 'wavenumber_per_m'] as const),
  ...(['hz', 'ghz', 'thz', 'ev', 'kev'] as const),
];
const DELIMITERS = { comma: ',', semicolon: ';', tab: '\t', bar: '|', blank: ' ' } as const;

export const ANSWER_USAGE = `Where a file leaves something open: --part 'HDU 2 NAME', --wavelength-column NAME, --flux-column NAME, --error-column NAME|none,
--axis-unit ${AXIS_UNITS.join('|')},
--rest-wavelength NM (vacuum, of a velocity axis), --delimiter ${Object.keys(DELIMITERS).join('|')}.`;

/** The corrections that these options make, or what is wrong with one. */
export function answersOf(values: Partial<Record<Flag, string>>): { corrections: ReadingCorrections } | { problem: string } {
  const axisUnit = AXIS_UNITS.find((unit) => unit === values['axis-unit']);
  if (values['axis-unit'] !== undefined && !axisUnit)
    return { problem: `--axis-unit takes ${AXIS_UNITS.join(', ')}, not "${values['axis-unit']}"` };
  const restWavelengthNm = values['rest-wavelength'] === undefined ? undefined : Number(values['rest-wavelength']);
  if (restWavelengthNm !== undefined && !(restWavelengthNm > 0 && restWavelengthNm < 1e9))
    return { problem: `--rest-wavelength takes a vacuum wavelength in nm, not "${values['rest-wavelength']}"` };
  const delimiter = DELIMITERS[values.delimiter as keyof typeof DELIMITERS] as (typeof DELIMITERS)[keyof typeof DELIMITERS] | undefined;
  if (values.delimiter !== undefined && !delimiter)
    return { problem: `--delimiter takes ${Object.keys(DELIMITERS).join(', ')}, not "${values.delimiter}"` };
  const error = values['error-column'];
  return {
    corrections: {
      ...(values.part && { place: values.part }),
      ...(values['wavelength-column'] && { wavelengthColumn: values['wavelength-column'] }),
      ...(values['flux-column'] && { fluxColumn: values['flux-column'] }),
      ...(error && { uncertaintyColumn: error === 'none' ? null : error }),
      ...(axisUnit && { axisUnit }),
      ...(restWavelengthNm && { restWavelengthNm }),
      ...(delimiter && { delimiter }),
    },
  };
}

/** Which options answer a refusal, and what there is to choose from; '' when none does. */
export function hintFor({ answers = [], columnFacts = [], places = [] }: ReadProblem): string {
  const flags = NAMES.filter((name) => answers.includes(FLAGS[name])).map((name) => `--${name}`);
  if (flags.length === 0) return '';
  const columns = columnFacts.filter((fact) => fact.numeric).map((fact) => fact.name);
  const parts = places.filter((place) => place.isSpectrum).map((place) => place.place);
  const list = (label: string, names: readonly string[]) => (names.length > 0 ? `; ${label}: ${names.slice(0, 30).join(', ')}` : '');
  return `answer with ${flags.join(' or ')}${list('columns', columns)}${list('parts', parts)}`;
}
