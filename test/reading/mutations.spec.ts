import { readSpectrum, type ReadResult } from '@foreveil/shared';
import { bytesOf, expected } from './support/corpus.js';
import { cpuSeconds } from './support/cpu.js';
import { mutateFits, mutateText, seeded } from './support/mutate.js';

/** Thousands of damaged files: none may throw, hang, or give a spectrum that is not sound. The seed makes every run the same. */
const SEED = 20260304;
const PER_FILE = 30;
const MOST_SECONDS = 1;

const stored = [...expected.good, ...expected.bad].filter((one) => !one.generated && !/\.json$|bomb|1gb|1mb|10000/.test(one.file));
const small = stored.map(({ file }) => ({ file, bytes: bytesOf(file) })).filter(({ bytes }) => bytes.length > 0 && bytes.length < 40_000);
const isFits = (file: string) => /\.fits(\.gz)?$/.test(file);

/** What is wrong with an answer; null when nothing is. */
function fault(result: ReadResult): string | null {
  if (!result.ok) {
    const { code, sentence } = result.problem;
    return code === 'reader_fault' || sentence.length === 0 || sentence.length > 600 ? `${code}: ${sentence}` : null;
  }
  const { wavelength, flux, sigma, bad } = result.spectrum;
  if (wavelength.length < 2 || flux.length !== wavelength.length || bad.length !== wavelength.length) return 'lengths';
  for (let i = 0; i < wavelength.length; i++) {
    if (!(wavelength[i]! > (i === 0 ? 0 : wavelength[i - 1]!)) || !Number.isFinite(wavelength[i]!)) return `order at ${i}`;
    if (!Number.isFinite(flux[i]!) && bad[i] !== 1) return `flux at ${i}`;
    if (sigma && !(sigma[i]! > 0 && sigma[i]! < Infinity) && bad[i] !== 1) return `sigma at ${i}`;
  }
  return null;
}

it.each([
  ['FITS', small.filter(({ file }) => isFits(file)), mutateFits],
  ['text', small.filter(({ file }) => !isFits(file)), mutateText],
] as const)('%s files survive mutations', (_, files, mutate) => {
  const random = seeded(SEED);
  const faults: string[] = [];
  let slowest = 0;
  let refused = 0;
  let tried = 0;
  for (const { file, bytes } of files)
    for (let k = 0; k < PER_FILE; k++) {
      const mutated = mutate(bytes, random);
      const { seconds, result } = cpuSeconds(() => readSpectrum(mutated, file));
      slowest = Math.max(slowest, seconds);
      const wrong = fault(result);
      if (wrong) faults.push(`${file} mutation ${k}: ${wrong}`);
      if (!result.ok) refused++;
      tried++;
    }
  expect(faults).toEqual([]);
  expect(slowest).toBeLessThan(MOST_SECONDS);
  expect(tried).toBeGreaterThan(1200);
  // mutations that are all refused, or all harmless, would test little
  expect(refused / tried).toBeGreaterThan(0.1);
  expect(refused / tried).toBeLessThan(0.9);
});
