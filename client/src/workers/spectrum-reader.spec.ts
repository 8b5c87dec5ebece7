import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { FileRead, ReadRequest } from './protocol.js';
import { MOST_BYTES, startReader } from './spectrum-reader.js';

const done: FileRead = { ok: false, problem: { code: 'test', sentence: 'Read.' }, lines: [] };

/** A worker whose answers the test gives. */
class FakeWorker {
  onmessage: ((event: { data: unknown }) => void) | null = null;
  onerror: (() => void) | null = null;
  readonly asked: ReadRequest[] = [];
  readonly terminate = vi.fn();
  postMessage(request: ReadRequest) {
    this.asked.push(request);
  }
  answer(read: FileRead = done) {
    this.onmessage?.({ data: { id: this.asked.at(-1)!.id, read } });
  }
}

describe('the reader of files', () => {
  const workers: FakeWorker[] = [];
  const make = () => {
    const worker = new FakeWorker();
    workers.push(worker);
    return worker as unknown as Worker;
  };
  beforeEach(() => {
    workers.length = 0;
    vi.useFakeTimers();
  });
  afterEach(() => vi.useRealTimers());
  const file = (name: string) => new File(['1 2'], name);

  it('reads one file after the other', async () => {
    const reader = startReader(make);
    const [first, second] = [reader.read(file('a'), {}), reader.read(file('b'), {})];
    expect(workers[0]!.asked.map((request) => request.file.name)).toEqual(['a']);
    workers[0]!.answer();
    await first;
    expect(workers[0]!.asked.map((request) => request.file.name)).toEqual(['a', 'b']);
    workers[0]!.answer();
    await expect(second).resolves.toBe(done);
  });

  it('stops a file that takes too long, says so, and reads the next with a fresh worker', async () => {
    const reader = startReader(make);
    const [slow, next] = [reader.read(file('slow'), {}), reader.read(file('next'), {})];
    vi.advanceTimersByTime(60_000);
    await expect(slow).resolves.toMatchObject({ ok: false, problem: { code: 'too_slow' } });
    expect(workers[0]!.terminate).toHaveBeenCalled();
    workers[1]!.answer();
    await expect(next).resolves.toBe(done);
  });

  it('survives the death of its worker', async () => {
    const reader = startReader(make);
    const read = reader.read(file('bomb'), {});
    workers[0]!.onerror?.();
    await expect(read).resolves.toMatchObject({ ok: false, problem: { code: 'reader_died' } });
  });

  it('does not even open what the server would not take', async () => {
    const huge = Object.defineProperty(file('huge'), 'size', { value: MOST_BYTES + 1 });
    await expect(startReader(make).read(huge, {})).resolves.toMatchObject({ ok: false, problem: { code: 'too_large' } });
    expect(workers).toHaveLength(0);
  });
});
