import { readDamaged } from './support/damage.js';

/** Thousands of damaged files: none may throw, hang, or give a spectrum that makes no sense. `npm run bench -- mutations` reads 100 000. */
const SEED = 20260304;
const MOST_SECONDS = 1;

it.each(['fits', 'text'] as const)('%s files survive mutations', (kind) => {
  const { tried, refused, slowestSeconds, faults } = readDamaged(kind, 1500, SEED);
  expect(faults).toEqual([]);
  expect(slowestSeconds).toBeLessThan(MOST_SECONDS);
  expect(tried).toBeGreaterThanOrEqual(1500);
  // mutations that are all refused, or all harmless, would test little
  expect(refused / tried).toBeGreaterThan(0.1);
  expect(refused / tried).toBeLessThan(0.9);
});
