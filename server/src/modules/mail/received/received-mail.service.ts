import { Inject, Injectable } from '@nestjs/common';
import type { ReceivedMail, ReceivedMailSummary } from '@foreveil/shared';
import type { Knex } from 'knex';
import PostalMime, { type Email } from 'postal-mime';
import { notFound } from '../../../common/errors/domain-error.js';
import { KNEX } from '../../../database/knex.js';
import { MailSink } from './mail-sink.service.js';

interface Row {
  readonly id: string;
  readonly received_at: Date;
  readonly envelope_to: string[];
  readonly raw: Buffer;
}

const SHOWN = 100;

@Injectable()
export class ReceivedMailService {
  constructor(
    @Inject(KNEX) private readonly db: Knex,
    private readonly sink: MailSink,
  ) {}

  async list(): Promise<ReceivedMailSummary[]> {
    if (!this.sink.isOpen) throw notFound();
    const rows = await this.db('received_mail').orderBy('id', 'desc').limit(SHOWN).select<Row[]>();
    return Promise.all(rows.map(async (row) => summary(row, await PostalMime.parse(row.raw))));
  }

  async get(id: string): Promise<ReceivedMail> {
    if (!this.sink.isOpen || !/^\d{1,15}$/.test(id)) throw notFound();
    const row = await this.db('received_mail').where({ id }).first<Row>();
    if (!row) throw notFound();
    const email = await PostalMime.parse(row.raw);
    return { ...summary(row, email), from: email.from?.address ?? '', text: email.text ?? '', html: email.html ?? '' };
  }
}

const summary = ({ id, received_at: at, envelope_to: to }: Row, { subject }: Email): ReceivedMailSummary => ({
  id,
  receivedAt: at.toISOString(),
  to,
  subject: subject ?? '',
});
