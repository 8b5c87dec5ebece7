import { createHash, randomUUID } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { mkdir, readdir, rm, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import type { StorageEngine } from 'multer';

/** An uploaded file on the disk of this machine, hashed while it came in. */
export interface UploadedFile {
  readonly originalname: string;
  readonly path: string;
  readonly sizeBytes: number;
  readonly sha256: string;
}

/** What a server that was killed in the middle of an upload has left. */
const STALE_MS = 60 * 60 * 1000;

/** Writes the part `file` of an upload to a folder of ours, so that an upload takes no memory, whatever its size. */
export class UploadStorage implements StorageEngine {
  constructor(private readonly folder: string) {}

  /** Makes the folder, readable by this account only, and takes away what is left from before. */
  async prepare(): Promise<void> {
    await mkdir(this.folder, { recursive: true, mode: 0o700 });
    for (const name of await readdir(this.folder)) {
      const path = join(this.folder, name);
      const age = await stat(path).then(
        ({ mtimeMs }) => Date.now() - mtimeMs,
        () => 0,
      );
      if (age > STALE_MS) await rm(path, { force: true });
    }
  }

  /** A name for a file of ours; never one that came from outside. */
  newPath(): string {
    return join(this.folder, randomUUID());
  }

  _handleFile(_: unknown, file: Express.Multer.File, done: (error?: unknown, info?: Partial<Express.Multer.File>) => void): void {
    const path = this.newPath();
    const hash = createHash('sha256');
    let sizeBytes = 0;
    const counted = new Transform({
      transform(chunk: Buffer, _encoding, next) {
        hash.update(chunk);
        sizeBytes += chunk.length;
        next(null, chunk);
      },
    });
    pipeline(file.stream, counted, createWriteStream(path, { mode: 0o600 })).then(
      () => done(null, { path, sizeBytes, sha256: hash.digest('hex') } as Partial<Express.Multer.File>),
      (error: unknown) => void rm(path, { force: true }).finally(() => done(error)),
    );
  }

  _removeFile(_: unknown, file: Express.Multer.File, done: (error: Error | null) => void): void {
    rm(file.path, { force: true }).then(() => done(null), done);
  }
}
