import { createHash } from 'node:crypto';
import { Inject, Injectable, Logger } from '@nestjs/common';
import { encodeSamples, type SpectrumDetail, type SpectrumSummary } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import { checked } from '../../common/errors/validation.js';
import { Turnstile } from '../../common/turnstile.js';
import type { Scope } from '../../common/scope.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import type { Destination } from '../targets/settle-target.js';
import { UploadMetaDto } from './dto/upload-meta.dto.js';
import { findSpectra, findSpectrum } from './find-spectra.js';
import { labelFrom, storedFileName } from './file-name.js';
import { readInThread } from './read-in-thread.js';
import { findSpectrumIdByHash } from './spectra.repository.js';
import { loadSpectrum, slicesOf } from './spectrum-bytes.js';
import { storeUpload } from './store-upload.js';

/** Files that are read at the same time: each may take the memory of a whole reader. */
const READERS = 2;

interface Upload {
  readonly file: { readonly originalname: string; readonly buffer: Buffer } | undefined;
  readonly meta: unknown;
}

@Injectable()
export class SpectraService {
  private readonly logger = new Logger('Spectra');
  private readonly readers = new Turnstile(READERS);

  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  list(scope: Scope): Promise<SpectrumSummary[]> {
    return findSpectra(this.db, scope);
  }

  async get(scope: Scope, id: string): Promise<SpectrumDetail> {
    const detail = await findSpectrum(this.db, scope, id);
    if (!detail) throw notFound();
    return detail;
  }

  /** Reads the file again, whatever the page saw in it, and stores everything or nothing. */
  async upload(actor: Actor, scope: Scope, { file, meta }: Upload): Promise<SpectrumDetail> {
    if (!file?.buffer.length) throw invalid('/file', 'must be a file that is not empty');
    const wanted = parsedMeta(meta);
    const sha256 = createHash('sha256').update(file.buffer).digest('hex');
    await this.refuseDuplicate(scope, sha256);
    const fileName = storedFileName(file.originalname);
    const corrections = JSON.parse(JSON.stringify(wanted.corrections ?? {})) as NonNullable<typeof wanted.corrections>;
    const read = await this.read({ bytes: file.buffer, fileName, corrections });
    const made = {
      ...read,
      ...{ userId: actor.userId, label: wanted.label ?? labelFrom(fileName), fileName, original: file.buffer, sha256, corrections },
    };
    const id = await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const stored = await storeUpload(trx, scope, destinationOf(wanted, read.reading), made, this.config);
      if (!stored) await this.refuseDuplicate(scope, sha256);
      return stored!;
    });
    return this.get(scope, id);
  }

  /** @returns the columns as contract/samples.ts describes */
  async samples(scope: Scope, id: string): Promise<Uint8Array> {
    const spectrum = await loadSpectrum(this.db, scope, id);
    if (!spectrum) throw notFound();
    return encodeSamples(spectrum);
  }

  /** The bytes as they were delivered, in slices. */
  async original(scope: Scope, id: string): Promise<{ fileName: string; sizeBytes: number; slices: AsyncIterable<Buffer> }> {
    const { fileName, sizeBytes } = await this.get(scope, id);
    return { fileName, sizeBytes, slices: slicesOf(this.db, scope, id, 'original') };
  }

  private async refuseDuplicate(scope: Scope, sha256: string): Promise<void> {
    const id = await findSpectrumIdByHash(this.db, scope, sha256);
    if (!id) return;
    const existing = await this.get(scope, id);
    const detail = `This file is already in the programme: "${existing.label}" of ${existing.targetName}.`;
    throw new DomainError('duplicate_spectrum', detail, { current: existing });
  }

  private async read(job: Parameters<typeof readInThread>[0]) {
    const failed = (error: unknown) => this.logger.error(`the reader failed on ${job.fileName}: ${String(error)}`);
    const result = await this.readers.pass(() => readInThread(job, this.config, failed));
    if (result.ok) return { spectrum: result.spectrum, reading: result.reading, preview: result.preview };
    const { sentence } = result.problem;
    throw new DomainError('unreadable_spectrum', sentence, { errors: [{ pointer: '/file', detail: sentence }] });
  }
}

const invalid = (pointer: string, detail: string) =>
  new DomainError('invalid_request', `${pointer} ${detail}`, { errors: [{ pointer, detail }] });

function parsedMeta(meta: unknown): UploadMetaDto {
  let value: unknown;
  try {
    value = JSON.parse(typeof meta === 'string' ? meta : 'null');
  } catch {
    throw invalid('/meta', 'must be JSON');
  }
  const wanted = checked(UploadMetaDto, value, '/meta');
  if ((wanted.targetId === undefined) === (wanted.targetName === undefined))
    throw invalid('/meta', 'must hold either targetId or targetName');
  return wanted;
}

function destinationOf(
  { targetId, targetName, targetKind }: UploadMetaDto,
  position: { raDeg: number | null; decDeg: number | null },
): Destination {
  if (targetId !== undefined) return { targetId };
  return { targetName: targetName!, kind: targetKind ?? 'star', raDeg: position.raDeg, decDeg: position.decDeg };
}
