import { once } from 'node:events';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import type { ClientBase } from 'pg';
import { from as copyFrom } from 'pg-copy-streams';
import type { Trx } from './transaction.js';

type Chunks = Iterable<Uint8Array> | AsyncIterable<Uint8Array>;

/** A value in PostgreSQL's binary form: its length first, so that it can be sent piece by piece. */
export interface CopyField {
  /** null for SQL's null */
  readonly length: number | null;
  readonly chunks: () => Chunks;
}

const whole = (bytes: Buffer | null): CopyField => ({ length: bytes?.length ?? null, chunks: () => (bytes ? [bytes] : []) });

export const asText = (value: string | null): CopyField => whole(value === null ? null : Buffer.from(value));
export const asUuid = (value: string): CopyField => whole(Buffer.from(value.replaceAll('-', ''), 'hex'));
/** the first byte is the version of the form, 1 */
export const asJsonb = (value: unknown): CopyField =>
  whole(value === null ? null : Buffer.concat([Buffer.of(1), Buffer.from(JSON.stringify(value))]));

export function asInt4(value: number): CopyField {
  const bytes = Buffer.alloc(4);
  bytes.writeInt32BE(value);
  return whole(bytes);
}

export function asFloat8(value: number | null): CopyField {
  const bytes = Buffer.alloc(8);
  if (value !== null) bytes.writeDoubleBE(value);
  return whole(value === null ? null : bytes);
}

/** Pieces of this size pass through memory; the bytes themselves are not copied as a whole. */
const PIECE = 1024 * 1024;

export function asBytea(value: Uint8Array | Float64Array | null): CopyField {
  if (value === null) return whole(null);
  const bytes = Buffer.from(value.buffer, value.byteOffset, value.byteLength);
  return { length: bytes.length, chunks: () => piecesOf(bytes) };
}

function* piecesOf(bytes: Buffer): Generator<Buffer> {
  for (let at = 0; at < bytes.length; at += PIECE) yield bytes.subarray(at, at + PIECE);
}

const SIGNATURE = Buffer.from('PGCOPY\n\xff\r\n\0\0\0\0\0\0\0\0\0', 'latin1');
const END = Buffer.of(0xff, 0xff);

/** PostgreSQL's manual, chapter COPY, "Binary Format". */
async function* rowBytes(fields: readonly CopyField[]): AsyncGenerator<Uint8Array> {
  const count = Buffer.alloc(2);
  count.writeInt16BE(fields.length);
  yield Buffer.concat([SIGNATURE, count]);
  for (const { length, chunks } of fields) {
    const head = Buffer.alloc(4);
    head.writeInt32BE(length ?? -1);
    yield head;
    yield* chunks();
  }
  yield END;
}

/**
 * Inserts one row by COPY in the caller's transaction. Unlike the parameters of an INSERT its values are not gathered in one message, so a
 * file of any size passes through in small pieces. @param fields by column; names are ours, never a caller's
 */
export async function copyRow(trx: Trx, table: string, fields: Readonly<Record<string, CopyField>>): Promise<void> {
  const columns = Object.keys(fields).map((name) => `"${name}"`);
  const connection = (await (trx.client as { acquireConnection(): Promise<unknown> }).acquireConnection()) as ClientBase;
  const into = connection.query(copyFrom(`copy "${table}" (${columns.join(', ')}) from stdin (format binary)`));
  try {
    await pipeline(Readable.from(rowBytes(Object.values(fields)), { objectMode: false }), into);
  } catch (error) {
    // the connection is in COPY until the server has heard of the end; the rollback must not come before that
    if (!into.closed) await once(into, 'close').catch(() => undefined);
    throw error;
  }
}
