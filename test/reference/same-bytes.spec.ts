import { execFile } from 'node:child_process';
import { promisify } from 'node:util';
import { DEFAULT_LIST_VERSION, PROGRAM_VERSION, type Analysis } from '@foreveil/shared';

// Same file, settings, list and program: same bytes, whatever ran before in the process, in a process started afresh and in a thread.

const FILES = ['curlew-nebula.fits.gz', 'plover-7-ultraviolet.fits.gz'].map((name) => `seeds/data/spectra/${name}`);

/** One text a file, in the order of `FILES`. */
async function bytesOf(script: string, files: readonly string[]): Promise<string[]> {
  const options = ['--import', 'tsx', '--conditions=foreveil-source', `test/support/${script}`];
  const { stdout } = await promisify(execFile)(process.execPath, [...options, ...files], { maxBuffer: 2 ** 28 });
  const texts = stdout.trim().split('\n');
  return FILES.map((file) => texts[files.indexOf(file)]!);
}

describe('an analysis', () => {
  let once: string[];
  beforeAll(async () => {
    once = await bytesOf('analyse-files.ts', FILES);
  }, 180_000);

  it('says which program and list made it, and holds something', () => {
    for (const text of once) {
      const { programVersion, lineListVersion, features } = JSON.parse(text) as Analysis;
      expect([programVersion, lineListVersion]).toEqual([PROGRAM_VERSION, DEFAULT_LIST_VERSION]);
      expect(features.length).toBeGreaterThan(10);
    }
  });

  it('has the same bytes in another process that did other things before', async () => {
    expect(await bytesOf('analyse-files.ts', [...FILES].reverse())).toEqual(once);
  }, 180_000);

  it('has the same bytes in a thread', async () => {
    expect(await bytesOf('analyse-in-thread.mjs', FILES)).toEqual(once);
  }, 180_000);
});
