import { useSyncExternalStore } from 'react';
import type { Range } from '../../../plot/view.js';

/** A stretch that a person marked on the curve, by keys, by dragging or by numbers. */
export interface RegionState {
  /** null until both ends are set */
  readonly region: Range | null;
  /** the first end, while the second is awaited */
  readonly start: number | null;
  /** a drag marks a region instead of zooming */
  readonly dragMarks: boolean;
}

const NOTHING: RegionState = { region: null, start: null, dragMarks: false };
const sorted = (a: number, b: number): Range => (a <= b ? { fromNm: a, toNm: b } : { fromNm: b, toNm: a });

/** The marked region, outside React since edges are dragged. */
export class RegionStore {
  private state: RegionState = NOTHING;
  private readonly listeners = new Set<() => void>();

  readonly get = (): RegionState => this.state;
  readonly subscribe = (listener: () => void) => {
    this.listeners.add(listener);
    return () => void this.listeners.delete(listener);
  };

  mark(a: number, b: number): void {
    if (a !== b) this.put({ ...this.state, region: sorted(a, b), start: null });
  }

  /** One end: the other one stays when there is one on the proper side, else it is awaited. */
  edge(which: 'start' | 'end', nm: number): void {
    const { region, start } = this.state;
    if (region) {
      const [from, to] = which === 'start' ? [nm, region.toNm] : [region.fromNm, nm];
      if (from < to) return this.mark(from, to);
    }
    if (start !== null && which === 'end') return this.mark(start, nm);
    this.put({ ...this.state, region: null, start: nm });
  }

  setDragMarks(dragMarks: boolean): void {
    this.put({ ...this.state, dragMarks });
  }

  clear(): void {
    this.put({ ...NOTHING, dragMarks: this.state.dragMarks });
  }

  private put(state: RegionState): void {
    this.state = state;
    this.listeners.forEach((listener) => listener());
  }
}

export const useRegion = (store: RegionStore): RegionState => useSyncExternalStore(store.subscribe, store.get);
