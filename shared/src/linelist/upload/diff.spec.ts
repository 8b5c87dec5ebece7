import fc from 'fast-check';
import { diffLines, mergeLines } from './diff.js';
import { parseLines } from './parse-lines.js';

const lines = (rows: string) => parseLines(`id,species,wavelength_vac [nm],log_gf,source\n${rows}`).lines;

test('tells what was added, removed and changed, and in which fields', () => {
  const diff = diffLines(
    lines('a,Na I,500,0,x\nb,K I,600,0,x\nc,Fe I,700,0,x'),
    lines('a,Na I,500,0,x\nb,K I,600.1,-1,x\nd,Ti II,800,0,x'),
  );
  expect(diff.added.map(({ id }) => id)).toEqual(['d']);
  expect(diff.removed.map(({ id }) => id)).toEqual(['c']);
  expect(diff.changed.map(({ after, fields }) => [after.id, fields])).toEqual([['b', ['wavelengthNm', 'logGf']]]);
  expect(diff.unchanged).toBe(1);
});

test('what is merged in wins, and nothing else is lost or doubled', () => {
  const ids = fc.uniqueArray(fc.integer({ min: 0, max: 30 }));
  const made = (list: number[], source: string) => lines(list.map((i) => `n${i},Na I,${500 + i},0,${source}`).join('\n'));
  fc.assert(
    fc.property(ids, ids, (first, second) => {
      const merged = mergeLines(first.length ? made(first, 'old') : [], second.length ? made(second, 'new') : []);
      expect(merged.map(({ id }) => id).sort()).toEqual([...new Set([...first, ...second])].map((i) => `n${i}`).sort());
      for (const { id, source } of merged) expect(source).toBe(second.includes(Number(id.slice(1))) ? 'new' : 'old');
      expect(merged.map(({ wavelengthNm }) => wavelengthNm)).toEqual(merged.map(({ wavelengthNm }) => wavelengthNm).sort((a, b) => a - b));
    }),
    { numRuns: 50 },
  );
});
