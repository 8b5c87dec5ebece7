import { createHash } from 'node:crypto';
import { apiPaths, readSpectrum, type SpectrumDetail, type UploadMeta } from '@foreveil/shared';
import type { Test } from 'supertest';
import { inTransaction } from '../../../server/src/database/transaction.js';
import { findSpectrum } from '../../../server/src/modules/spectra/find-spectra.js';
import { previewOf } from '../../../server/src/modules/spectra/preview.js';
import { storeUpload } from '../../../server/src/modules/spectra/store-upload.js';
import type { Api } from './api.js';
import type { Person, Team } from './person.js';

export const POINTS = 400;
/** centres of the dips, vacuum nm */
const DIPS = [500.5, 501.5, 503];

/** A small spectrum as a text file: 500 to 504 nm in vacuum, three dips of 40 % on a flat continuum, errors of 1 %. @param seed makes another file */
export function spectrumText(seed = 0): string {
  const rows = Array.from({ length: POINTS }, (_, i) => {
    const nm = 500 + i * 0.01;
    const depth = DIPS.reduce((sum, centre) => sum + 0.4 * Math.exp(-0.5 * ((nm - centre) / 0.05) ** 2), 0);
    const ripple = 0.01 * Math.sin(12.9898 * i + 78.233 * seed);
    return `${nm.toFixed(4)},${(1 - depth + ripple).toFixed(6)},0.01`;
  });
  return ['# medium: vacuum', '# frame: barycentric', '# resolving_power: 5000', 'wavelength (nm),flux,flux_error', ...rows, ''].join('\n');
}

export interface Sent {
  readonly content?: string | Buffer;
  readonly fileName?: string;
  readonly meta?: UploadMeta | Record<string, unknown> | string;
}

let seeds = 0;

/** Uploads a file, one that nobody uploaded before unless `content` says which. */
export function upload(
  person: Person,
  programmeId: string,
  { content, fileName = 'star.csv', meta = { targetName: 'Star' } }: Sent = {},
): Test {
  const bytes = Buffer.from(content ?? spectrumText(++seeds));
  const text = typeof meta === 'string' ? meta : JSON.stringify(meta);
  return person.post(apiPaths.spectra(programmeId)).field('meta', text).attach('file', bytes, fileName);
}

export async function uploaded(person: Person, programmeId: string, sent: Sent = {}): Promise<SpectrumDetail> {
  const answer = await upload(person, programmeId, sent);
  if (answer.status !== 201) throw new Error(`upload answered ${answer.status}: ${answer.text}`);
  return answer.body as SpectrumDetail;
}

/** What an upload leaves behind, without its way over HTTP and through a thread. */
export async function stored(api: Api, { programmeId, analyst }: Team, targetName = 'Star'): Promise<SpectrumDetail> {
  const original = Buffer.from(spectrumText(++seeds));
  const read = readSpectrum(original, 'star.csv');
  if (!read.ok) throw new Error(read.problem.sentence);
  const { spectrum, reading } = read;
  const sha256 = createHash('sha256').update(original).digest('hex');
  const facts = { userId: analyst.userId, label: 'star', fileName: 'star.csv', original, sha256, corrections: {} };
  const destination = { targetName, kind: 'star', raDeg: null, decDeg: null } as const;
  const id = await inTransaction(api.db, (trx) =>
    storeUpload(trx, { programmeId }, destination, { ...facts, spectrum, reading, preview: previewOf(spectrum) }, api.config),
  );
  return (await findSpectrum(api.db, { programmeId }, id!))!;
}
