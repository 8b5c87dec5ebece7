import { readInThread } from './read-in-thread.js';

const job = { bytes: new Uint8Array([1, 2, 3]), fileName: 'star.csv', corrections: {} };
const limits = { readSeconds: 20, readMemoryMb: 32 };
const thread = (code: string) =>
  new URL(`data:text/javascript,${encodeURIComponent(`import { parentPort, workerData } from 'node:worker_threads';${code}`)}`);

/** Reads with a thread of our making; @returns the result and what was heard of a failure */
async function read(code: string, changes: Partial<typeof limits> = {}) {
  const failures: unknown[] = [];
  const result = await readInThread(job, { ...limits, ...changes }, (error) => failures.push(error), thread(code));
  return { result, failures: failures.map(String) };
}
const codeOf = ({ result }: Awaited<ReturnType<typeof read>>) => (result.ok ? 'ok' : result.problem.code);

test('hands the job to the thread and its answer back', async () => {
  const { result } = await read('parentPort.postMessage({ ok: true, got: workerData })');
  expect(result).toEqual({ ok: true, got: job });
});

test('stops a reader that does not come to an end', async () => {
  const from = Date.now();
  const answer = await read('for (;;);', { readSeconds: 0.5 });
  expect(codeOf(answer)).toBe('too_slow');
  expect(Date.now() - from).toBeLessThan(5_000);
  expect(answer.failures).toEqual([]);
});

test('stops a reader that takes too much memory, and says so', async () => {
  const answer = await read('const all = []; for (;;) all.push(Array.from({ length: 1000 }, (_, i) => ({ i })));');
  expect(codeOf(answer)).toBe('too_much_memory');
  expect(answer.failures).toHaveLength(1);
});

test('outlives a reader that throws, and hears why', async () => {
  const answer = await read("throw new TypeError('columns of undefined')");
  expect(codeOf(answer)).toBe('reader_failed');
  expect(answer.failures).toEqual(['TypeError: columns of undefined']);
  expect(answer.result).not.toMatchObject({ problem: { sentence: expect.stringContaining('undefined') as string } });
});

test('outlives a reader that leaves without a word', async () => {
  expect(codeOf(await read('process.exit(3)'))).toBe('reader_failed');
});
