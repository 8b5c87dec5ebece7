import { Inject, Injectable, Logger, type BeforeApplicationShutdown, type OnApplicationBootstrap } from '@nestjs/common';
import type { Knex } from 'knex';
import { SMTPServer } from 'smtp-server';
import type { Config } from '../../../config/config.js';
import { CONFIG } from '../../../config/config.module.js';
import { KNEX } from '../../../database/knex.js';

const LARGEST = 1024 * 1024;
const KEPT = 500;

/** The mail server of a demonstration: listens on the loopback, passes nothing on, keeps the newest messages for its page. */
@Injectable()
export class MailSink implements OnApplicationBootstrap, BeforeApplicationShutdown {
  private readonly logger = new Logger('MailSink');
  private server: SMTPServer | null = null;

  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  get isOpen(): boolean {
    return this.config.mailSinkPort !== null;
  }

  /** The port it listens on, which is another one than asked for when that was 0. */
  get port(): number {
    const address = this.server?.server.address();
    return typeof address === 'object' && address ? address.port : 0;
  }

  async onApplicationBootstrap(): Promise<void> {
    if (this.config.mailSinkPort === null) return;
    const server = new SMTPServer({
      authOptional: true,
      disabledCommands: ['STARTTLS', 'AUTH'],
      size: LARGEST,
      onData: (stream, session, done) => {
        const pieces: Buffer[] = [];
        stream.on('data', (piece: Buffer) => pieces.push(piece));
        stream.on('end', () => {
          const to = session.envelope.rcptTo.map(({ address }) => address);
          this.keep(to, Buffer.concat(pieces)).then(
            () => done(),
            (error: unknown) => done(error as Error),
          );
        });
      },
    });
    server.on('error', (error) => this.logger.warn(String(error)));
    await new Promise<void>((resolve) => server.listen(this.config.mailSinkPort!, '127.0.0.1', resolve));
    this.server = server;
  }

  async beforeApplicationShutdown(): Promise<void> {
    const { server } = this;
    this.server = null;
    if (server) await new Promise<void>((resolve) => server.close(() => resolve()));
  }

  private async keep(to: string[], raw: Buffer): Promise<void> {
    await this.db('received_mail').insert({ envelope_to: to, raw });
    await this.db('received_mail').whereRaw('id <= (select max(id) from received_mail) - ?', [KEPT]).delete();
  }
}
