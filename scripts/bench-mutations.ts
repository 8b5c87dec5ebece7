/** npm run bench -- mutations [COUNT] [SEED]: reads COUNT (100 000) damaged FITS and text files; exit status 1 when one is read wrong. */
import { readDamaged } from '../test/reading/support/damage.js';

const [count = 100_000, seed = 20260304] = process.argv.slice(2).map(Number);
const STEP = 10_000;
const MOST_SECONDS = 1;
let failed = false;
for (const kind of ['fits', 'text'] as const) {
  const began = performance.now();
  const heard = (tried: number) => {
    if (tried % STEP === 0) console.error(`${kind}: ${tried}`);
  };
  const { tried, refused, slowestSeconds, faults } = readDamaged(kind, Math.ceil(count / 2), seed, heard);
  const seconds = ((performance.now() - began) / 1000).toFixed(0);
  console.log(
    `${kind}: ${tried} damaged files, seed ${seed}: ${refused} refused, ${tried - refused} read, ${faults.length} wrong; ` +
      `slowest ${(slowestSeconds * 1000).toFixed(0)} ms of processor time; ${seconds} s in all`,
  );
  for (const fault of faults.slice(0, 50)) console.log(`  ${fault}`);
  failed ||= faults.length > 0 || slowestSeconds >= MOST_SECONDS;
}
console.log(`memory: ${(process.resourceUsage().maxRSS / 1024).toFixed(0)} MiB at most`);
process.exitCode = failed ? 1 : 0;
