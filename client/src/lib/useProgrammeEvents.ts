import { apiPaths, type ProgrammeEvent } from '@foreveil/shared';
import { useQueryClient, type QueryClient } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { applyEvent } from './programme-events.js';
import { programmeQueries } from './queries/programmes.js';

/** 'live': told at once. 'polling': the stream is down, so the page asks again every few seconds. */
export type Liveness = 'connecting' | 'live' | 'polling';

const POLL_MS = 10_000;
const LONGEST_WAIT_MS = 30_000;

/** Listens to a programme while mounted: keeps the cache fresh, reconnects with growing waits, asks again whenever something may have been missed. */
export function useProgrammeEvents(programmeId: string | undefined): Liveness {
  const client = useQueryClient();
  const [liveness, setLiveness] = useState<Liveness>('connecting');
  useEffect(() => {
    if (!programmeId) return;
    return listen(client, programmeId, setLiveness);
  }, [client, programmeId]);
  return liveness;
}

function listen(client: QueryClient, programmeId: string, tell: (liveness: Liveness) => void): () => void {
  let source: EventSource | null = null;
  let reconnect: ReturnType<typeof setTimeout> | undefined;
  let poll: ReturnType<typeof setInterval> | undefined;
  let failures = 0;
  const askAgain = () => void client.invalidateQueries({ queryKey: programmeQueries.within(programmeId) });

  const connect = () => {
    source = new EventSource(apiPaths.events(programmeId));
    source.onopen = () => {
      if (failures > 0) askAgain(); // events of the time in between are gone
      failures = 0;
      clearInterval(poll);
      poll = undefined;
      tell('live');
    };
    source.onmessage = ({ data }: MessageEvent<string>) => {
      const event = parseEvent(data);
      if (event) applyEvent(client, programmeId, event);
    };
    source.onerror = () => {
      failures++;
      tell('polling');
      poll ??= setInterval(askAgain, POLL_MS);
      // after a refusal the browser gives up by itself; after a cut it tries again on its own
      if (source?.readyState !== EventSource.CLOSED) return;
      source.close();
      reconnect = setTimeout(connect, Math.min(LONGEST_WAIT_MS, 1000 * 2 ** failures));
    };
  };
  connect();
  return () => {
    source?.close();
    clearTimeout(reconnect);
    clearInterval(poll);
  };
}

const KNOWN: ReadonlySet<string> = new Set<ProgrammeEvent['type']>([
  'analysis',
  'identification',
  'spectrum',
  'analysis_recipes',
  'comparison',
  'cloud',
  'programme',
]);

function parseEvent(data: string): ProgrammeEvent | null {
  try {
    const event = JSON.parse(data) as Partial<ProgrammeEvent>;
    return event.type && KNOWN.has(event.type) ? (event as ProgrammeEvent) : null;
  } catch {
    return null; // a keep-alive or a cut line
  }
}
