import { Inject, Injectable } from '@nestjs/common';
import { PROGRAM_VERSION, lineReportCsv } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import { KNEX } from '../../database/knex.js';
import { addAudit } from '../audit/add-audit.js';
import { findLines } from '../linelists/line-list-store.js';
import { findHeading, findListsUsed, findReported, namedLines, type About } from './reports.repository.js';

@Injectable()
export class ReportsService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  /** The line report of a target or of one of its spectra, and what to call the file. */
  async lines(actor: Actor, scope: Scope, about: About): Promise<{ fileName: string; csv: string }> {
    const heading = await findHeading(this.db, scope, about);
    if (!heading) throw notFound();
    const spectra = await findReported(this.db, scope, about);
    const lines = await findLines(this.db, await findListsUsed(this.db, scope, about), namedLines(spectra));
    const writtenAt = new Date().toISOString();
    const csv = lineReportCsv({ ...heading, spectra, lines, programVersion: PROGRAM_VERSION, writtenAt });
    await addAudit(this.db, { ...scope, userId: actor.userId, action: 'report_exported', subject: Object.values(about)[0]!, facts: {} });
    return { fileName: `${heading.targetName} lines.csv`, csv };
  }
}
