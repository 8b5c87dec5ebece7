import { readFileSync } from 'node:fs';
import { parseDefaultList, readSpectrum, type Spectrum } from '@foreveil/shared';

const dataOf = (name: string) => readFileSync(new URL(`../../seeds/data/${name}`, import.meta.url));

/** The default line list. */
export const defaultList = () => parseDefaultList(dataOf('lines.csv').toString(), dataOf('telluric.csv').toString());

/** A stretch of a spectrum of the demonstration, short enough to be analysed many times. */
export function demoSlice(file: string, fromNm: number, toNm: number): Spectrum {
  const read = readSpectrum(dataOf(`spectra/${file}`), file);
  if (!read.ok) throw new Error(read.problem.sentence);
  const { wavelength, flux, sigma, bad } = read.spectrum;
  const from = wavelength.findIndex((nm) => nm >= fromNm);
  const to = wavelength.findLastIndex((nm) => nm <= toNm) + 1;
  return {
    ...read.spectrum,
    wavelength: wavelength.slice(from, to),
    flux: flux.slice(from, to),
    sigma: sigma && sigma.slice(from, to),
    bad: bad.slice(from, to),
  };
}
