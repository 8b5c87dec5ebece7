import { createWriteStream } from 'node:fs';
import { rm } from 'node:fs/promises';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { Inject, Injectable } from '@nestjs/common';
import type { ChangeSpectrum, ReadingCorrections, ReadingEvent, RemovedSpectrum, SpectrumDetail } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember, checkRole } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import type { Trx } from '../../database/transaction.js';
import { abortAnalysis } from '../analyses/abort-analysis.js';
import { queueAnalysis } from '../analyses/queue-analysis.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { settleTarget } from '../targets/settle-target.js';
import { findSpectrum } from './find-spectra.js';
import { carryDecisions, findActiveAnalyses } from './reread.js';
import { findSpectrumIdByHash, updateReading } from './spectra.repository.js';
import { loadSpectrum, slicesOf } from './spectrum-bytes.js';
import { SpectrumReader } from './spectrum-reader.js';
import {
  countDecisions,
  findReadings,
  findRemoved,
  lockSpectrum,
  setRemoved,
  updateSpectrum,
  type LockedSpectrum,
} from './spectrum-rows.js';
import { UploadStorage } from './upload-storage.js';

interface Reread {
  readonly corrections: ReadingCorrections;
  readonly recipe?: string;
}

/** What may change of a spectrum after it was uploaded: its name, its target, how its file is read, whether it is there. */
@Injectable()
export class SpectrumChanges {
  private readonly storage: UploadStorage;

  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
    private readonly reader: SpectrumReader,
  ) {
    this.storage = new UploadStorage(config.uploadDir);
  }

  async change(actor: Actor, scope: Scope, id: string, version: number, change: ChangeSpectrum): Promise<SpectrumDetail> {
    await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const before = await this.locked(trx, scope, id, version);
      const { targetId } = change;
      if (targetId) await settleTarget(trx, scope, { targetId }, actor.userId);
      await updateSpectrum(trx, scope, id, change);
      const facts = { from: { label: before.label, targetId: before.targetId }, to: { ...change } };
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'spectrum_changed', subject: id, facts });
      await sayEvent(trx, { kind: 'spectrum', ...scope, id });
    });
    return this.get(scope, id);
  }

  /** Reads the stored bytes with other corrections; decisions go along, analyses of before no longer count, and a new one starts. */
  async reread(actor: Actor, scope: Scope, id: string, version: number, { corrections, recipe }: Reread): Promise<SpectrumDetail> {
    const present = await this.get(scope, id);
    if (present.version !== version) throw stale(present);
    const read = await this.readStored(scope, present, corrections);
    await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const { revision } = await this.locked(trx, scope, id, version);
      const before = await loadSpectrum(trx, scope, id);
      for (const analysisId of await findActiveAnalyses(trx, scope, id)) {
        await abortAnalysis(trx, scope, analysisId);
        await sayEvent(trx, { kind: 'analysis_cancelled', id: analysisId });
      }
      const row = { ...read, id, userId: actor.userId, corrections, recipe: recipe ?? null, revision: revision + 1 };
      await updateReading(trx, scope, row);
      const decisions = await carryDecisions(trx, scope, id, before!, read.spectrum);
      const facts = { from: present.corrections, to: corrections, recipe: recipe ?? null, revision: revision + 1, decisions };
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'spectrum_read_anew', subject: id, facts });
      await sayEvent(trx, { kind: 'spectrum', ...scope, id });
      await queueAnalysis(trx, scope, { spectrumId: id, userId: actor.userId }, this.config.analysisSeconds);
    });
    return this.get(scope, id);
  }

  async readings(scope: Scope, id: string): Promise<ReadingEvent[]> {
    await this.get(scope, id);
    return findReadings(this.db, scope, id);
  }

  /** It can be put back; where people decided on it, only a lead may. */
  async remove(actor: Actor, scope: Scope, id: string, version: number): Promise<void> {
    await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      await this.locked(trx, scope, id, version);
      const decisions = await this.checkDecisions(trx, actor, scope, id);
      for (const analysisId of await findActiveAnalyses(trx, scope, id)) {
        await abortAnalysis(trx, scope, analysisId);
        await sayEvent(trx, { kind: 'analysis_cancelled', id: analysisId });
      }
      await setRemoved(trx, scope, id, actor.userId);
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'spectrum_removed', subject: id, facts: { decisions } });
      await sayEvent(trx, { kind: 'spectrum', ...scope, id });
    });
  }

  async restore(actor: Actor, scope: Scope, id: string): Promise<SpectrumDetail> {
    await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const row = await lockSpectrum(trx, scope, id);
      if (!row) throw notFound();
      if (!row.removed) return;
      await this.checkDecisions(trx, actor, scope, id);
      const twin = await findSpectrumIdByHash(trx, scope, row.sha256);
      if (twin) {
        const detail = 'The same file was uploaded again meanwhile. Remove that spectrum first.';
        throw new DomainError('duplicate_spectrum', detail, { current: await this.get(scope, twin) });
      }
      await setRemoved(trx, scope, id, null);
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'spectrum_restored', subject: id, facts: {} });
      await sayEvent(trx, { kind: 'spectrum', ...scope, id });
    });
    return this.get(scope, id);
  }

  removed(scope: Scope): Promise<RemovedSpectrum[]> {
    return findRemoved(this.db, scope);
  }

  private async get(scope: Scope, id: string): Promise<SpectrumDetail> {
    const detail = await findSpectrum(this.db, scope, id);
    if (!detail) throw notFound();
    return detail;
  }

  private async locked(trx: Trx, scope: Scope, id: string, version: number): Promise<LockedSpectrum> {
    const row = await lockSpectrum(trx, scope, id);
    if (!row || row.removed) throw notFound();
    if (row.version !== version) throw stale(await this.get(scope, id));
    return row;
  }

  private async checkDecisions(trx: Trx, actor: Actor, scope: Scope, id: string): Promise<number> {
    const decisions = await countDecisions(trx, scope, id);
    if (decisions > 0) await checkRole(trx, actor.userId, scope.programmeId, 'lead');
    return decisions;
  }

  /** The original bytes lie on the disk while they are read, as at the upload. */
  private async readStored(scope: Scope, { id, fileName }: SpectrumDetail, corrections: ReadingCorrections) {
    const path = this.storage.newPath();
    try {
      await pipeline(Readable.from(slicesOf(this.db, scope, id, 'original')), createWriteStream(path, { mode: 0o600 }));
      return await this.reader.read({ path, fileName, corrections });
    } finally {
      await rm(path, { force: true });
    }
  }
}

const stale = (current: SpectrumDetail) =>
  new DomainError('stale_version', 'A teammate changed this spectrum in the meantime. Look at it as it is now, then save again.', {
    current,
  });
