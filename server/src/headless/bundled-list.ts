import { readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parseDefaultList, type LineList } from '@foreveil/shared';

const folder = join(dirname(fileURLToPath(import.meta.url)), '..', '..', '..', 'seeds', 'data');

/** The line list that comes with the program. */
export const bundledList = (): LineList =>
  parseDefaultList(readFileSync(join(folder, 'lines.csv'), 'utf8'), readFileSync(join(folder, 'telluric.csv'), 'utf8'));
