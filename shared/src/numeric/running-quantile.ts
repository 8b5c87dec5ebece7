/**
 * Quantile of a sliding window at a cost that hardly grows with the window: each block of one window length is sorted once, and its
 * sorted order is kept as a doubly linked list. While the window slides from one block to the next, samples are unlinked from the old
 * list and, in the reverse order of an earlier unlinking, linked again into the new one, both in constant time.
 * Source: Suomela 2014, "Median filtering is equivalent to sorting", arXiv:1406.1717 (recalled from memory).
 */

/** Sorted linked list over one block of `size` samples; index `size` is the end mark. */
class Block {
  readonly next: Int32Array;
  readonly previous: Int32Array;
  readonly key: Float64Array;
  /** place of each sample in sorted order */
  private readonly place: Int32Array;
  private readonly order: Int32Array;
  private readonly spare: Int32Array;
  /** the sample that the cursor stands on, and how many linked samples lie before it */
  cursor = 0;
  before = 0;

  constructor(readonly size: number) {
    this.next = new Int32Array(size + 1);
    this.previous = new Int32Array(size + 1);
    this.key = new Float64Array(size + 1);
    this.place = new Int32Array(size + 1);
    this.order = new Int32Array(size);
    this.spare = new Int32Array(size);
  }

  /** Takes `values[from..]`, missing ones past the end counting as largest, and links all of it. */
  load(values: Float64Array, from: number) {
    const { size, key, order, next, previous, place } = this;
    for (let i = 0; i < size; i++) {
      key[i] = from + i < values.length ? values[from + i]! : Infinity;
      order[i] = i;
    }
    key[size] = Infinity;
    place[size] = size;
    sortByKey(order, this.spare, key);
    let last = size;
    for (let k = 0; k < size; k++) {
      const i = order[k]!;
      place[i] = k;
      next[last] = i;
      previous[i] = last;
      last = i;
    }
    next[last] = size;
    previous[size] = last;
    this.cursor = next[size]!;
    this.before = 0;
  }

  /** Unlinks everything, last sample first, so that `link` may bring the samples back from the first on. */
  unwind() {
    for (let i = this.size - 1; i >= 0; i--) {
      this.next[this.previous[i]!] = this.next[i]!;
      this.previous[this.next[i]!] = this.previous[i]!;
    }
    this.cursor = this.size;
    this.before = 0;
  }

  unlink(i: number) {
    const { next, previous } = this;
    next[previous[i]!] = next[i]!;
    previous[next[i]!] = previous[i]!;
    if (this.place[i]! < this.place[this.cursor]!) {
      this.before--;
    } else {
      if (this.cursor === i) this.cursor = next[i]!;
      if (this.before > 0) {
        this.cursor = previous[this.cursor]!;
        this.before--;
      }
    }
  }

  link(i: number) {
    this.next[this.previous[i]!] = i;
    this.previous[this.next[i]!] = i;
    if (this.place[i]! < this.place[this.cursor]!) this.cursor = this.previous[this.cursor]!;
  }

  advance() {
    this.cursor = this.next[this.cursor]!;
    this.before++;
  }
}

const RUN = 8;

/** Sorts `order` by `key`: short runs by insertion, then merges. Stable. */
function sortByKey(order: Int32Array, spare: Int32Array, key: Float64Array) {
  const n = order.length;
  for (let a = 0; a < n; a += RUN) {
    const b = Math.min(n, a + RUN);
    for (let i = a + 1; i < b; i++) {
      const held = order[i]!;
      const value = key[held]!;
      let j = i - 1;
      while (j >= a && key[order[j]!]! > value) {
        order[j + 1] = order[j]!;
        j--;
      }
      order[j + 1] = held;
    }
  }
  let from = order;
  let to = spare;
  for (let width = RUN; width < n; width *= 2) {
    for (let a = 0; a < n; a += 2 * width) merge(from, to, key, a, Math.min(n, a + width), Math.min(n, a + 2 * width));
    const held = from;
    from = to;
    to = held;
  }
  if (from !== order) order.set(from);
}

function merge(from: Int32Array, to: Int32Array, key: Float64Array, a: number, middle: number, end: number) {
  let i = a;
  let j = middle;
  for (let k = a; k < end; k++) {
    if (i < middle && (j >= end || key[from[i]!]! <= key[from[j]!]!)) to[k] = from[i++]!;
    else to[k] = from[j++]!;
  }
}

/**
 * For each sample the order statistic nearest to quantile `p` (0 to 1) of the `window` samples about it; near the ends that of the first
 * or last full window. An even window is made odd by one more sample; a window longer than the array becomes the whole array.
 * NaN samples are left out (the window then spans `window` samples that are not NaN) and get the value of the sample before them.
 */
export function runningQuantile(values: Float64Array, window: number, p: number): Float64Array {
  const packed = values.filter((v) => v === v);
  if (packed.length === values.length) return overNumbers(values, window, p);
  const inner = overNumbers(packed, window, p);
  let k = -1;
  return values.map((v) => inner[Math.max(0, v === v ? ++k : k)] ?? NaN);
}

/** Running median: `runningQuantile` at one half. */
export const runningMedian = (values: Float64Array, window: number): Float64Array => runningQuantile(values, window, 0.5);

function overNumbers(values: Float64Array, window: number, p: number): Float64Array {
  const n = values.length;
  if (n === 0) return new Float64Array(0);
  const half = Math.min(Math.max(0, Math.floor(window / 2)), (n - 1) >> 1);
  const size = 2 * half + 1;
  const rank = Math.round(Math.min(1, Math.max(0, p)) * (size - 1));
  const out = new Float64Array(n);
  let old = new Block(size);
  let fresh = new Block(size);
  old.load(values, 0);
  for (let k = 0; k < rank; k++) old.advance();
  out.fill(old.key[old.cursor]!, 0, half + 1);
  for (let from = size; from < n; from += size) {
    fresh.load(values, from);
    fresh.unwind();
    for (let i = 0, end = Math.min(size, n - from); i < end; i++) {
      old.unlink(i);
      fresh.link(i);
      while (old.before + fresh.before < rank) {
        if (old.key[old.cursor]! <= fresh.key[fresh.cursor]!) old.advance();
        else fresh.advance();
      }
      const a = old.key[old.cursor]!;
      const b = fresh.key[fresh.cursor]!;
      out[from + i - half] = a < b ? a : b;
    }
    const held = old;
    old = fresh;
    fresh = held;
  }
  out.fill(out[n - 1 - half]!, n - half);
  return out;
}
