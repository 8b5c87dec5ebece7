import { readFileSync } from 'node:fs';
import { parseDefaultList } from '../parse-default.js';
import { diffLines } from './diff.js';
import { parseLines } from './parse-lines.js';
import { linesCsv } from './write-lines.js';

const data = (name: string) => readFileSync(new URL(`../../../../seeds/data/${name}`, import.meta.url), 'utf8');

test('the whole default list goes out and comes back the same, but for strengths that an upload derives', () => {
  const { lines } = parseDefaultList(data('lines.csv'), data('telluric.csv'));
  const back = parseLines(linesCsv(lines), { citation: 'x' });
  expect(back.problems).toEqual([]);
  const { added, removed, changed } = diffLines(lines, back.lines);
  expect([added.length, removed.length]).toEqual([0, 0]);
  const fields = new Set(changed.flatMap((c) => c.fields));
  for (const derived of ['oscillatorStrength', 'logGf', 'multiplet'] as const) fields.delete(derived);
  expect([...fields]).toEqual([]);
  // what was there is not changed, only what was blank is derived
  for (const { before, after } of changed) {
    expect(after.multiplet).toBe(before.multiplet.trim());
    if (before.logGf !== null) expect(after.logGf).toBe(before.logGf);
    if (before.oscillatorStrength !== null) expect(after.oscillatorStrength).toBe(before.oscillatorStrength);
  }
});
