import type { Listener } from '../../../database/listener.js';
import { EVENTS_CHANNEL, parseSaid } from '../../events/say-event.js';

/** Tells those at work on an analysis when it is cancelled. A word that gets lost is made good by the next sign of life, which finds out. */
export class Cancellations {
  private readonly stops = new Map<string, () => void>();

  constructor(private readonly listener: Listener) {}

  listen(): Promise<void> {
    return this.listener.on(EVENTS_CHANNEL, (payload) => {
      const said = parseSaid(payload);
      if (said.kind === 'analysis_cancelled') this.stops.get(said.id)?.();
    });
  }

  on(analysisId: string, stop: () => void): () => void {
    this.stops.set(analysisId, stop);
    return () => this.stops.delete(analysisId);
  }
}
