import { Inject, Injectable, Logger } from '@nestjs/common';
import type { Reading, Spectrum, SpectrumSummary } from '@foreveil/shared';
import { DomainError } from '../../common/errors/domain-error.js';
import { Turnstile } from '../../common/turnstile.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { readInThread, type ReadJob } from './read-in-thread.js';

/** Files that are read at the same time: each may take the memory of a whole reader. */
const READERS = 2;

export interface SpectrumRead {
  readonly spectrum: Spectrum;
  readonly reading: Reading;
  readonly preview: SpectrumSummary['preview'];
}

/** Reads files one or two at a time in threads with limits; whatever a file does to a reader is a refusal of that file. */
@Injectable()
export class SpectrumReader {
  private readonly logger = new Logger('Reader');
  private readonly readers = new Turnstile(READERS);

  constructor(@Inject(CONFIG) private readonly config: Config) {}

  /** @throws unreadable_spectrum */
  async read(job: ReadJob): Promise<SpectrumRead> {
    const failed = (error: unknown) => this.logger.error(`the reader failed on ${job.fileName}: ${String(error)}`);
    const result = await this.readers.pass(() => readInThread(job, this.config, failed));
    if (result.ok) return { spectrum: result.spectrum, reading: result.reading, preview: result.preview };
    const { sentence } = result.problem;
    throw new DomainError('unreadable_spectrum', sentence, { errors: [{ pointer: '/file', detail: sentence }] });
  }
}
