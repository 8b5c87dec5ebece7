import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { readSpectrum } from '@foreveil/shared';
import { hashPassword } from '../server/src/common/auth/password.js';
import type { Config } from '../server/src/config/config.js';
import type { Knex } from '../server/src/database/knex.js';
import { inTransaction, type Trx } from '../server/src/database/transaction.js';
import { previewOf } from '../server/src/modules/spectra/preview.js';
import { storeUpload } from '../server/src/modules/spectra/store-upload.js';
import { DEMO_ACCOUNTS } from './demo-accounts.js';
import { DEMO_SPECTRA, type DemoSpectrum } from './demo-spectra.js';
import { seedData } from './line-list.js';

const PROGRAMME = {
  name: 'Dunlin cloud (simulated)',
  description:
    'Demonstration: invented objects, computed spectra. Which lines are the star, which the gas in front of it, which our own air?',
};

/** Fills an empty database with an invented team and its six simulated spectra; their analyses are queued. */
export async function seedDemo(db: Knex, config: Config): Promise<void> {
  const hashes = await Promise.all(DEMO_ACCOUNTS.map(({ password }) => hashPassword(password, config)));
  await inTransaction(db, async (trx) => {
    const users = await insertUsers(trx, hashes);
    const [lead, analyst] = (['lead', 'analyst'] as const).map((role) => users[DEMO_ACCOUNTS.findIndex((a) => a.role === role)]!);
    const [programme] = await trx('programmes')
      .insert({ ...PROGRAMME, simulated: true, created_by: lead })
      .returning<{ id: string }[]>('id');
    const members = DEMO_ACCOUNTS.flatMap(({ role }, i) => (role ? { programme_id: programme!.id, user_id: users[i], role } : []));
    await trx('memberships').insert(members);
    for (const demo of DEMO_SPECTRA) await storeDemo(trx, programme!.id, analyst!, demo, config);
  });
}

async function insertUsers(trx: Trx, hashes: readonly string[]): Promise<string[]> {
  const rows = DEMO_ACCOUNTS.map(({ email, name, administrator = false }, i) => ({ email, name, administrator, password_hash: hashes[i] }));
  const made = await trx('users').insert(rows).returning<{ id: string }[]>('id');
  return made.map(({ id }) => id);
}

async function storeDemo(trx: Trx, programmeId: string, userId: string, demo: DemoSpectrum, config: Config): Promise<void> {
  const { file: fileName, label, targetName, kind, notes } = demo;
  const original = readFileSync(seedData(`spectra/${fileName}`));
  const read = readSpectrum(original, fileName);
  if (!read.ok) throw new Error(`${fileName}: ${read.problem.sentence}`);
  const destination = { targetName, kind, notes, raDeg: null, decDeg: null, simulated: true };
  const sha256 = createHash('sha256').update(original).digest('hex');
  const { spectrum, reading } = read;
  const made = { userId, label, fileName, original, sha256, reading, corrections: {}, spectrum, preview: previewOf(spectrum) };
  await storeUpload(trx, { programmeId }, destination, made, config);
}
