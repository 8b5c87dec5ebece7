import { useSyncExternalStore } from 'react';

/** The sample being read. */
export interface CursorState {
  /** index of the sample; null when nothing is pointed at */
  readonly sample: number | null;
  /** what moved it: only the keyboard's cursor is spoken */
  readonly by: 'pointer' | 'keys';
}

const NOWHERE: CursorState = { sample: null, by: 'pointer' };

/** The data cursor shared by curve, residual and read-out; outside React for the same reason as the view. */
export class CursorStore {
  private state = NOWHERE;
  private readonly listeners = new Set<() => void>();

  readonly get = (): CursorState => this.state;

  readonly subscribe = (listener: () => void) => {
    this.listeners.add(listener);
    return () => void this.listeners.delete(listener);
  };

  set(sample: number | null, by: CursorState['by']) {
    if (sample === this.state.sample && by === this.state.by) return;
    this.state = sample === null ? NOWHERE : { sample, by };
    for (const listener of this.listeners) listener();
  }
}

export const useCursor = (store: CursorStore): CursorState => useSyncExternalStore(store.subscribe, store.get);
