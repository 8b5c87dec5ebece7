import { Inject, Injectable, type CallHandler, type ExecutionContext, type NestInterceptor, type OnModuleInit } from '@nestjs/common';
import type { Request, Response } from 'express';
import multer, { MulterError } from 'multer';
import { rm } from 'node:fs/promises';
import { finalize, type Observable } from 'rxjs';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { UploadStorage } from './upload-storage.js';

const META_BYTES = 64 * 1024;

/** Takes one file and one JSON text from a multipart body; the file lies on the disk while the request is answered, no longer. */
@Injectable()
export class UploadedFileInterceptor implements NestInterceptor, OnModuleInit {
  private readonly storage: UploadStorage;
  private readonly take: ReturnType<multer.Multer['single']>;

  constructor(@Inject(CONFIG) private readonly config: Config) {
    this.storage = new UploadStorage(config.uploadDir);
    this.take = multer({
      storage: this.storage,
      defParamCharset: 'utf8',
      limits: { fileSize: config.uploadLimitBytes, files: 1, fields: 1, fieldSize: META_BYTES, parts: 2, headerPairs: 20 },
    }).single('file');
  }

  onModuleInit(): Promise<void> {
    return this.storage.prepare();
  }

  async intercept(context: ExecutionContext, next: CallHandler): Promise<Observable<unknown>> {
    const http = context.switchToHttp();
    const request = http.getRequest<Request>();
    await new Promise<void>((resolve, reject) => {
      void this.take(request, http.getResponse<Response>(), (error?: unknown) =>
        error === undefined ? resolve() : reject(this.refusal(error)),
      );
    });
    const forget = () => void (request.file && rm(request.file.path, { force: true }).catch(() => undefined));
    return next.handle().pipe(finalize(forget));
  }

  private refusal(error: unknown): unknown {
    if (!(error instanceof MulterError) || error.code !== 'LIMIT_FILE_SIZE') return error;
    const most = megabytes(this.config.uploadLimitBytes);
    return new DomainError(
      'too_large',
      `The file is larger than the ${most} that this server accepts. Cut the spectrum, or pack it with gzip.`,
    );
  }
}

const megabytes = (bytes: number) => `${Number((bytes / 1024 / 1024).toPrecision(3))} MiB`;
