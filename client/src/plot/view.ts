import { useSyncExternalStore } from 'react';

/** The stretch of wavelength in view, vacuum nm. */
export interface Range {
  readonly fromNm: number;
  readonly toNm: number;
}

const HISTORY_LENGTH = 100;
/** Wheel turns and drags within this time are one step of the history. */
const SAME_GESTURE_MS = 500;

/**
 * What stretch is in view, with its history. It lives outside React because panning moves it sixty times a second and only the panels
 * need to follow.
 */
export class ViewStore {
  private range: Range;
  private past: Range[] = [];
  private future: Range[] = [];
  private lastMove = -Infinity;
  /** whether the newest step was part of a gesture, which is followed at once, and not a jump, which may glide */
  inGesture = false;
  private readonly listeners = new Set<() => void>();

  constructor(
    readonly whole: Range,
    initial: Range = whole,
    /** shortest stretch that may be shown, nm */
    private readonly shortestNm = (whole.toNm - whole.fromNm) / 20_000,
    private readonly now: () => number = () => performance.now(),
  ) {
    this.range = this.clamp(initial);
  }

  readonly get = (): Range => this.range;

  readonly subscribe = (listener: () => void) => {
    this.listeners.add(listener);
    return () => void this.listeners.delete(listener);
  };

  /** A step a person wants to go back from: a zoom, a typed range, a jump. */
  show(range: Range) {
    this.remember();
    this.lastMove = -Infinity;
    this.inGesture = false;
    this.put(range);
  }

  /** A step within a gesture: wheel, pan, frame drag. The state before the gesture enters the history once. */
  move(range: Range) {
    const now = this.now();
    if (now - this.lastMove > SAME_GESTURE_MS) this.remember();
    this.lastMove = now;
    this.inGesture = true;
    this.put(range);
  }

  /** Zoom by `factor` (below 1: closer) keeping `aroundNm` in its place. */
  zoomed(factor: number, aroundNm = (this.range.fromNm + this.range.toNm) / 2): Range {
    const { fromNm, toNm } = this.range;
    return { fromNm: aroundNm - (aroundNm - fromNm) * factor, toNm: aroundNm + (toNm - aroundNm) * factor };
  }

  /** Shifted by a fraction of its own length, as far as the spectrum goes; an infinite fraction is its end. */
  shifted(fraction: number): Range {
    const { fromNm, toNm } = this.range;
    return this.placed(fromNm + fraction * (toNm - fromNm), toNm - fromNm);
  }

  /** Brings a wavelength into view, only when it is out of it or near the edge. */
  reveal(nm: number) {
    const { fromNm, toNm } = this.range;
    const margin = 0.04 * (toNm - fromNm);
    if (nm > fromNm + margin && nm < toNm - margin) return;
    this.show(this.placed(nm - (toNm - fromNm) / 2, toNm - fromNm));
  }

  back() {
    this.travel(this.past, this.future);
  }
  forward() {
    this.travel(this.future, this.past);
  }
  get canGoBack() {
    return this.past.length > 0;
  }
  get canGoForward() {
    return this.future.length > 0;
  }

  private travel(from: Range[], to: Range[]) {
    const range = from.pop();
    if (!range) return;
    to.push(this.range);
    this.lastMove = -Infinity;
    this.inGesture = false;
    this.put(range);
  }

  private remember() {
    this.past.push(this.range);
    if (this.past.length > HISTORY_LENGTH) this.past.shift();
    this.future = [];
  }

  private put(range: Range) {
    this.range = this.clamp(range);
    for (const listener of this.listeners) listener();
  }

  /** A stretch of this length starting there; moved, not cut, at the ends of the spectrum. */
  private placed(fromNm: number, length: number): Range {
    const from = Math.min(Math.max(fromNm, this.whole.fromNm), this.whole.toNm - length);
    return { fromNm: from, toNm: from + length };
  }

  private clamp({ fromNm, toNm }: Range): Range {
    const [a, b] = fromNm <= toNm ? [fromNm, toNm] : [toNm, fromNm];
    if (!Number.isFinite(a) || !Number.isFinite(b)) return this.whole;
    const from = Math.max(a, this.whole.fromNm);
    const to = Math.min(b, this.whole.toNm);
    if (to - from >= this.shortestNm) return { fromNm: from, toNm: to };
    const middle = Math.min(Math.max((a + b) / 2, this.whole.fromNm + this.shortestNm / 2), this.whole.toNm - this.shortestNm / 2);
    return { fromNm: middle - this.shortestNm / 2, toNm: middle + this.shortestNm / 2 };
  }
}

/** Follows the view; renders on every move, so for small components only. */
export const useView = (store: ViewStore): Range => useSyncExternalStore(store.subscribe, store.get);
