import type { ReadingCorrections, ReadProblem } from './types.js';

type Field = keyof ReadingCorrections;

/** Corrections that answer a problem, the likeliest first. What is not here no correction can answer: the file itself is at fault. */
const ANSWERS: Readonly<Record<string, readonly Field[]>> = {
  unknown_axis_unit: ['axisUnit', 'wavelengthColumn'],
  no_rest_wavelength: ['restWavelengthNm', 'wavelengthColumn'],
  no_wavelength_column: ['wavelengthColumn'],
  no_wavelength: ['wavelengthColumn'],
  negative_wavelength: ['wavelengthColumn'],
  same_wavelength: ['wavelengthColumn'],
  no_flux_column: ['fluxColumn'],
  no_flux: ['fluxColumn'],
  lengths_differ: ['fluxColumn', 'wavelengthColumn'],
  no_usable_sample: ['uncertaintyColumn', 'fluxColumn'],
  no_spectrum: ['wavelengthColumn', 'fluxColumn', 'place'],
  column_not_found: ['wavelengthColumn', 'fluxColumn', 'uncertaintyColumn', 'maskColumn'],
  place_not_found: ['place'],
  decimal_comma: ['delimiter', 'decimalComma'],
  fields_do_not_match: ['delimiter', 'decimalComma'],
  not_numbers: ['delimiter', 'decimalComma'],
  one_column: ['delimiter', 'decimalComma'],
  too_few_points: ['place'],
};

const COLUMNS: ReadonlySet<Field> = new Set<Field>(['wavelengthColumn', 'fluxColumn', 'uncertaintyColumn', 'maskColumn']);

/** The problem with the corrections that can answer it: a column only where there are columns to choose from, a part where there are parts. */
export function withAnswers(problem: ReadProblem): ReadProblem {
  const columns = problem.columnFacts?.filter((fact) => fact.numeric).length ?? 0;
  const parts = problem.places?.filter((place) => place.isSpectrum).length ?? 0;
  const answers = (ANSWERS[problem.code] ?? []).filter((field) =>
    COLUMNS.has(field) ? columns > 1 : field === 'place' ? parts > 0 : true,
  );
  return answers.length > 0 ? { ...problem, answers } : problem;
}
