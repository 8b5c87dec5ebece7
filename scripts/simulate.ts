// Spectra with known truth, for whoever changes the method:
//   npm run simulate -- FOLDER [--kinds nebula,survey] [--count 4] [--seed 1] [--trouble plain|usual|harsh]
// writes KIND-NN.csv and KIND-NN.truth.json. The same arguments give the same bytes.
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { parseArgs } from 'node:util';
import { csvOf, KINDS, sceneOf, simulate, type Kind, type Trouble } from '../test/simulation/index.js';

const USAGE = `usage: npm run simulate -- FOLDER [--kinds ${KINDS.join(',')}] [--count 4] [--seed 1] [--trouble plain|usual|harsh]`;
const TROUBLES: readonly Trouble[] = ['plain', 'usual', 'harsh'];

const { values, positionals } = parseArgs({
  allowPositionals: true,
  options: {
    kinds: { type: 'string', default: KINDS.join(',') },
    count: { type: 'string', default: '4' },
    seed: { type: 'string', default: '1' },
    trouble: { type: 'string', default: 'usual' },
  },
});
const [folder] = positionals;
const kinds = values.kinds.split(',').filter((kind): kind is Kind => (KINDS as readonly string[]).includes(kind));
const trouble = TROUBLES.find((one) => one === values.trouble);
const [count, seed] = [Number(values.count), Number(values.seed)];
if (!folder || kinds.length === 0 || !trouble || !(count > 0) || !Number.isInteger(seed)) {
  console.error(USAGE);
  process.exit(2);
}
mkdirSync(folder, { recursive: true });
for (const kind of kinds) {
  for (let index = 0; index < count; index++) {
    const simulated = simulate(sceneOf({ kind, index, seed, trouble }));
    const name = simulated.truth.file.replace(/\.csv$/, '');
    writeFileSync(join(folder, `${name}.csv`), csvOf(simulated));
    writeFileSync(join(folder, `${name}.truth.json`), JSON.stringify(simulated.truth));
    console.log(
      `${name}: ${simulated.spectrum.flux.length} samples, ${simulated.truth.lines.filter(({ snr }) => snr >= 8).length} lines above 8 sigma`,
    );
  }
}
