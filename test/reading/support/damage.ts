import { readSpectrum } from '@foreveil/shared';
import { bytesOf, expected } from './corpus.js';
import { cpuSeconds } from './cpu.js';
import { faultOf } from './fault.js';
import { mutateFits, mutateText, seeded } from './mutate.js';

/** What came of reading damaged copies of the files of the corpus. */
export interface Damage {
  readonly tried: number;
  readonly refused: number;
  readonly slowestSeconds: number;
  /** file, number of the mutation and what is wrong */
  readonly faults: readonly string[];
}

const MOST_BYTES = 40_000;
const isFits = (file: string) => /\.fits(\.gz)?$/.test(file);

/** Files small enough that thousands of copies can be read; files made to be slow have tests of their own. */
function smallFiles(kind: 'fits' | 'text'): { file: string; bytes: Uint8Array }[] {
  return [...expected.good, ...expected.bad]
    .filter((one) => !one.generated && !/\.json$|bomb|1gb|1mb|10000/.test(one.file))
    .filter(({ file }) => isFits(file) === (kind === 'fits'))
    .map(({ file }) => ({ file, bytes: bytesOf(file) }))
    .filter(({ bytes }) => bytes.length > 0 && bytes.length < MOST_BYTES);
}

/** Reads at least `count` damaged copies, the same in every run with the same seed; every third is damaged twice. */
export function readDamaged(kind: 'fits' | 'text', count: number, seed: number, heard: (tried: number) => void = () => {}): Damage {
  const files = smallFiles(kind);
  const mutate = kind === 'fits' ? mutateFits : mutateText;
  const random = seeded(seed);
  const faults: string[] = [];
  let slowestSeconds = 0;
  let refused = 0;
  let tried = 0;
  for (let round = 0; tried < count; round++)
    for (const { file, bytes } of files) {
      const once = mutate(bytes, random);
      const damaged = round % 3 === 2 && once.length > 0 ? mutate(once, random) : once;
      const { seconds, result } = cpuSeconds(() => readSpectrum(damaged, file));
      slowestSeconds = Math.max(slowestSeconds, seconds);
      const fault = faultOf(result);
      if (fault) faults.push(`${file} mutation ${round}: ${fault}`);
      if (!result.ok) refused++;
      tried++;
      heard(tried);
    }
  return { tried, refused, slowestSeconds, faults };
}
