import { Inject, Injectable } from '@nestjs/common';
import type { KnownFile, SpectrumDetail, SpectrumSummary } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import { checked } from '../../common/errors/validation.js';
import type { Scope } from '../../common/scope.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import type { Destination } from '../targets/settle-target.js';
import { plainCorrections } from './dto/corrections.dto.js';
import { UploadMetaDto } from './dto/upload-meta.dto.js';
import { findSpectra, findSpectrum } from './find-spectra.js';
import { labelFrom, storedFileName } from './file-name.js';
import { findKnownFiles, findSpectrumIdByHash } from './spectra.repository.js';
import { openSamples, slicesOf, type SampleStream } from './spectrum-bytes.js';
import { SpectrumReader } from './spectrum-reader.js';
import { storeUpload } from './store-upload.js';
import type { UploadedFile } from './upload-storage.js';

interface Upload {
  readonly file: UploadedFile | undefined;
  readonly meta: unknown;
}

@Injectable()
export class SpectraService {
  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
    private readonly reader: SpectrumReader,
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
    if (!file?.sizeBytes) throw invalid('/file', 'must be a file that is not empty');
    const wanted = parsedMeta(meta);
    const { path, sha256, sizeBytes } = file;
    await this.refuseDuplicate(scope, sha256);
    const fileName = storedFileName(file.originalname);
    const corrections = plainCorrections(wanted.corrections);
    const read = await this.reader.read({ path, fileName, corrections });
    const made = {
      ...read,
      ...{ userId: actor.userId, label: wanted.label ?? labelFrom(fileName), fileName, sha256, corrections },
      ...{ original: { path, sizeBytes }, recipe: wanted.recipe ?? null },
    };
    const id = await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const stored = await storeUpload(trx, scope, destinationOf(wanted, read.reading), made, this.config);
      if (!stored) await this.refuseDuplicate(scope, sha256);
      return stored!;
    });
    return this.get(scope, id);
  }

  /** @returns the columns as contract/samples.ts describes */
  async samples(scope: Scope, id: string): Promise<SampleStream> {
    const samples = await openSamples(this.db, scope, id);
    if (!samples) throw notFound();
    return samples;
  }

  /** The bytes as they were delivered, in slices. */
  async original(scope: Scope, id: string): Promise<{ fileName: string; sizeBytes: number; slices: AsyncIterable<Buffer> }> {
    const { fileName, sizeBytes } = await this.get(scope, id);
    return { fileName, sizeBytes, slices: slicesOf(this.db, scope, id, 'original') };
  }

  /** Which of these files are in the programme already. */
  known(scope: Scope, hashes: readonly string[]): Promise<KnownFile[]> {
    return findKnownFiles(this.db, scope, hashes);
  }

  private async refuseDuplicate(scope: Scope, sha256: string): Promise<void> {
    const id = await findSpectrumIdByHash(this.db, scope, sha256);
    if (!id) return;
    const existing = await this.get(scope, id);
    const detail = `This file is already in the programme: "${existing.label}" of ${existing.targetName}.`;
    throw new DomainError('duplicate_spectrum', detail, { current: existing });
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
