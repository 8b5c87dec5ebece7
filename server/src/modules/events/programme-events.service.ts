import { Inject, Injectable, Logger, type BeforeApplicationShutdown, type OnModuleInit } from '@nestjs/common';
import type { ProgrammeEvent } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { roleIn } from '../../common/auth/membership.js';
import { actorHolds } from '../../common/auth/sessions.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import { Listener } from '../../database/listener.js';
import { eventOf } from './event-of.js';
import { EVENTS_CHANNEL, parseSaid } from './say-event.js';

/** One open page: who looks at which programme, and how to write to it. */
export interface Subscriber {
  readonly actor: Actor;
  readonly programmeId: string;
  write(text: string): void;
  end(): void;
}

/** Passes what any process says about a programme on to the pages that look at it. */
@Injectable()
export class ProgrammeEvents implements OnModuleInit, BeforeApplicationShutdown {
  private readonly logger = new Logger('Events');
  private readonly subscribers = new Set<Subscriber>();
  private beat: NodeJS.Timeout;

  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
    @Inject(Listener) private readonly listener: Listener,
  ) {}

  async onModuleInit(): Promise<void> {
    this.beat = setInterval(() => this.checkAll(), this.config.eventBeatSeconds * 1000);
    this.beat.unref();
    await this.listener.on(EVENTS_CHANNEL, (payload) => this.guarded(this.hear(payload)));
  }

  beforeApplicationShutdown(): void {
    clearInterval(this.beat);
    this.subscribers.forEach((subscriber) => subscriber.end());
  }

  /** @returns what to call when the page is gone */
  subscribe(subscriber: Subscriber): () => void {
    this.subscribers.add(subscriber);
    subscriber.write('retry: 2000\n\n');
    return () => this.subscribers.delete(subscriber);
  }

  private async hear(payload: string): Promise<void> {
    const said = parseSaid(payload);
    if (said.kind === 'session_ended') return this.endWhere(({ actor }) => actor.sessionId === said.sessionId);
    if (said.kind === 'analysis_cancelled') return; // for workers
    if (said.kind === 'programme') await this.checkOf(said.programmeId);
    const readers = [...this.subscribers].filter(({ programmeId }) => programmeId === said.programmeId);
    if (!readers.length) return;
    const event: ProgrammeEvent | null = await eventOf(this.db, said);
    if (event) readers.forEach((reader) => reader.write(`data: ${JSON.stringify(event)}\n\n`));
  }

  /** Members may have changed: who is none any more hears nothing further. */
  private async checkOf(programmeId: string): Promise<void> {
    await Promise.all([...this.subscribers].filter((one) => one.programmeId === programmeId).map((one) => this.check(one)));
  }

  private checkAll(): void {
    this.subscribers.forEach((subscriber) => this.guarded(this.check(subscriber)));
  }

  /** A comment line keeps proxies from closing the stream; a reader who lost the session or the programme is let go. */
  private async check(subscriber: Subscriber): Promise<void> {
    const { actor, programmeId } = subscriber;
    const [signedIn, role] = await Promise.all([
      actorHolds(this.db, actor, this.config.sessionIdleMinutes),
      roleIn(this.db, actor.userId, programmeId),
    ]);
    if (signedIn && role) subscriber.write(': beat\n\n');
    else this.endWhere((other) => other === subscriber);
  }

  private endWhere(matches: (subscriber: Subscriber) => boolean): void {
    for (const subscriber of this.subscribers) {
      if (!matches(subscriber)) continue;
      this.subscribers.delete(subscriber);
      subscriber.end();
    }
  }

  private guarded(work: Promise<void>): void {
    work.catch((error: unknown) => this.logger.warn(`an event could not be passed on: ${String(error)}`));
  }
}
