import type { Identification } from '@foreveil/shared';
import { QueryClientProvider, type QueryClient } from '@tanstack/react-query';
import { act, renderHook, waitFor } from '@testing-library/react';
import type { ReactNode } from 'react';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { identificationQueries } from '../../../lib/queries/spectra.js';
import { quietClient } from '../../../test/show.js';
import { anIdentification, answer, aProblem } from '../../../test/things.js';
import { lineRows, type LineRow } from '../lines/reading.js';
import { aResult } from '../test/a-result.js';
import { actOn } from './act.js';
import { useDecisions } from './use-decisions.js';

const { queryKey } = identificationQueries.list('p', 's');
const saved = (parts: Partial<Identification>) =>
  anIdentification({ featureIndex: 2, lineId: 'NaI-589.158', systemId: 'cloud', version: 1, ...parts });

/** The server's answers in turn; a list of what was asked of it. */
function server(...answers: (Response | (() => Promise<Response>))[]) {
  const asked: { path: string; ifMatch: string; body: unknown }[] = [];
  vi.stubGlobal('fetch', (path: string, init: RequestInit) => {
    if ((init.method ?? 'GET') === 'GET') return Promise.resolve(answer(200, []));
    asked.push({ path, ifMatch: (init.headers as Record<string, string>)['If-Match']!, body: JSON.parse(init.body as string) });
    const next = answers.shift();
    if (!next) throw new Error('asked once more than expected');
    return typeof next === 'function' ? next() : Promise.resolve(next);
  });
  return asked;
}

function start(known: Identification[] = []) {
  const client: QueryClient = quietClient();
  client.setQueryData(queryKey, known);
  // nothing watches the list here, so a refetch would not come; the cache is what the hook itself puts there
  const wrapper = ({ children }: { children: ReactNode }) => <QueryClientProvider client={client}>{children}</QueryClientProvider>;
  const hook = renderHook(() => useDecisions({ programmeId: 'p', spectrumId: 's', analysisId: 'a', by: 'Ana Weir' }), { wrapper });
  const list = () => client.getQueryData<Identification[]>(queryKey)!;
  const rows = () => lineRows(aResult(), list());
  const row = (): LineRow => rows()[2]!;
  return { hook, list, rows, row };
}

afterEach(() => vi.unstubAllGlobals());

describe('a decision', () => {
  it('shows at once, goes out with the version that was seen, and ends as the server saved it', async () => {
    let release = (_: Response) => {};
    const asked = server(() => new Promise((resolve) => (release = resolve)));
    const { hook, list, row } = start();
    let done: Promise<boolean> = Promise.resolve(false);
    act(() => void (done = hook.result.current.decide(row(), actOn(row(), 'accept', row().reading, 'clear'))));
    await waitFor(() => expect(list()).toMatchObject([{ state: 'accepted', version: 0, decidedBy: 'Ana Weir' }]));
    expect(hook.result.current.pending.has(2)).toBe(true);
    expect(asked).toEqual([
      {
        path: '/api/programmes/p/analyses/a/features/2/decision',
        ifMatch: '"0"',
        body: { action: 'accept', lineId: 'NaI-589.158', systemId: 'cloud', remark: 'clear' },
      },
    ]);
    release(answer(200, saved({ state: 'accepted' })));
    await act(async () => expect(await done).toBe(true));
    expect(list()).toMatchObject([{ version: 1, state: 'accepted' }]);
    expect(hook.result.current.pending.size).toBe(0);
  });

  it('is taken back when the server fails, and the failure is passed on', async () => {
    server(answer(500, aProblem()));
    const before = saved({ state: 'proposed', version: 4 });
    const { hook, list, row } = start([before]);
    await act(async () => expect(hook.result.current.decide(row(), actOn(row(), 'accept'))).rejects.toMatchObject({ code: 'internal' }));
    expect(list()).toEqual([before]);
  });

  it('is not sent twice while one on the same line is under way', async () => {
    let release = (_: Response) => {};
    const asked = server(() => new Promise((resolve) => (release = resolve)));
    const { hook, row } = start();
    let first: Promise<boolean> = Promise.resolve(false);
    act(() => void (first = hook.result.current.decide(row(), actOn(row(), 'accept'))));
    await waitFor(() => expect(asked).toHaveLength(1));
    await act(async () => expect(await hook.result.current.decide(row(), actOn(row(), 'reject'))).toBe(false));
    release(answer(200, saved({ state: 'accepted' })));
    await act(async () => void (await first));
    expect(asked).toHaveLength(1);
  });
});

describe('when a teammate was faster', () => {
  const theirs = saved({ state: 'accepted', version: 5, decidedBy: 'Ben Foss' });
  const clash = () => answer(412, aProblem({ status: 412, code: 'stale_version', current: theirs }));

  it('both versions are held, and theirs is on the page', async () => {
    server(clash());
    const { hook, list, row } = start();
    await act(async () => expect(await hook.result.current.decide(row(), actOn(row(), 'reject', row().reading, 'mine'))).toBe(false));
    expect(list()).toEqual([theirs]);
    expect(hook.result.current.conflict).toMatchObject({ theirs: { decidedBy: 'Ben Foss' }, mine: { action: 'reject', remark: 'mine' } });
    act(() => hook.result.current.keepTheirs());
    expect(hook.result.current.conflict).toBeNull();
    expect(list()).toEqual([theirs]);
  });

  it('mine can be put over theirs: reopened on their version, then decided on the next, with my remark', async () => {
    const asked = server(
      clash(),
      answer(200, saved({ state: 'proposed', version: 6 })),
      answer(200, saved({ state: 'rejected', version: 7 })),
    );
    const { hook, list, row } = start();
    await act(async () => void (await hook.result.current.decide(row(), actOn(row(), 'reject', row().reading, 'mine'))));
    await act(async () => expect(await hook.result.current.applyMine()).toBe(true));
    expect(asked.slice(1).map((a) => [a.ifMatch, (a.body as { action: string }).action, (a.body as { remark?: string }).remark])).toEqual([
      ['"5"', 'reopen', undefined],
      ['"6"', 'reject', 'mine'],
    ]);
    expect(list()).toMatchObject([{ state: 'rejected', version: 7 }]);
  });
});

describe('undo', () => {
  it('takes back the last decision on the version it left, and only once', async () => {
    const asked = server(answer(200, saved({ state: 'accepted', version: 1 })), answer(200, saved({ state: 'proposed', version: 2 })));
    const { hook, list, rows, row } = start();
    await act(async () => void (await hook.result.current.decide(row(), actOn(row(), 'accept'))));
    await act(async () => expect(await hook.result.current.undo(rows())).toBe(2));
    expect(asked[1]).toMatchObject({ ifMatch: '"1"', body: { action: 'reopen' } });
    expect(list()).toMatchObject([{ state: 'proposed', version: 2 }]);
    await act(async () => expect(await hook.result.current.undo(rows())).toBeNull());
  });
});
