import { readFileSync } from 'node:fs';
import { readSpectrum } from '@foreveil/shared';
import { bytesOf, expected, expectSound, sentences, type Bad } from './support/corpus.js';
import { cpuSeconds } from './support/cpu.js';

/**
 * Every bad file of the corpus against the outcomes that expected.json allows. Two entries are no input files and are checked
 * elsewhere: upload_names.json is a list of names (below), large_line_1gb.csv is made by large.spec.ts in a smaller size.
 */
const files = expected.bad.filter((bad) => bad.file !== 'bad/upload_names.json' && !bad.generated);

/** The person is asked by a problem that names the choice to make, so asking shows as a refusal here. */
const allowsRefusal = (outcome: string) => /reject|ask/.test(outcome);
const allowsReading = (outcome: string) => /accept|warn/.test(outcome);
const SECONDS = 1;

it('holds 68 files', () => expect(files.length).toBe(68));

describe.each(files)('$file ($what): $outcome', (bad: Bad) => {
  const bytes = bytesOf(bad.file);
  const { seconds, result } = cpuSeconds(() => readSpectrum(bytes, bad.file));
  const said = sentences(result).toLowerCase();

  it(`is answered within ${SECONDS} s of processor time`, () => expect(seconds).toBeLessThan(SECONDS));

  it('is answered in one of the ways allowed', () => {
    expect(result.ok ? allowsReading(bad.outcome) : allowsRefusal(bad.outcome)).toBe(true);
    if (!result.ok) expect(result.problem.code).not.toBe('reader_fault');
    if (result.ok && !bad.outcome.startsWith('accept_or') && bad.outcome !== 'accept')
      expect(result.reading.warnings.length).toBeGreaterThan(0);
  });

  it('says what is wrong', () => {
    for (const group of bad.must_mention) expect(group.filter((word) => said.includes(word))).not.toEqual([]);
    for (const line of bad.lines ?? []) expect(said).toContain(`line ${line}`);
    // a sentence, in one line, without control characters
    expect(said.split('\n').every((sentence) => sentence.length < 500)).toBe(true);
  });

  it('gives a sound spectrum if it gives one', () => {
    if (!result.ok) return expect(result.problem.sentence).toMatch(/[.?]$/);
    expectSound(result);
    if (bad.n_points !== undefined) expect(result.reading.points).toBe(bad.n_points);
  });
});

describe('names of uploaded files', () => {
  const names = JSON.parse(readFileSync('test/fixtures/corpus/bad/upload_names.json', 'utf8')) as { names: { name: string }[] };
  it('do not decide how a file is read', () => {
    const bytes = bytesOf('good/bintable_scalar.fits');
    const plain = readSpectrum(bytes, 'bintable_scalar.fits');
    expect(names.names.length).toBeGreaterThan(5);
    for (const { name } of names.names) expect(readSpectrum(bytes, name)).toEqual(plain);
  });
});
