import { addComponent, fitBlend, indexAt, type BlendLimits, type Component, type NormalisedSamples } from '../profiles/index.js';

/** Narrowest and widest profile allowed at a wavelength. */
export type LimitsAt = (wavelength: number) => BlendLimits;

/** The components found so far and the light they leave: the model all rounds of detection share. */
export class LineModel {
  components: Component[] = [];
  /** product of the dips plus sum of the peaks, in units of the continuum */
  readonly value: Float64Array;
  readonly #peaks: Float64Array;
  #neighbours: Neighbours | null = null;

  constructor(
    readonly data: NormalisedSamples,
    readonly limitsAt: LimitsAt,
  ) {
    this.value = new Float64Array(data.wavelength.length).fill(1);
    this.#peaks = new Float64Array(data.wavelength.length);
  }

  add(components: readonly Component[]): void {
    this.components = [...this.components, ...components].sort((a, b) => a.centre - b.centre);
  }

  remove(gone: ReadonlySet<Component>): void {
    if (gone.size) this.components = this.components.filter((c) => !gone.has(c));
  }

  /** Brings `value` up to date after components changed. */
  refresh(): void {
    const n = this.value.length;
    this.value.fill(1);
    this.#peaks.fill(0);
    for (const c of this.components) addComponent(c, this.data.wavelength, 0, n, this.value, this.#peaks);
    for (let i = 0; i < n; i++) this.value[i]! += this.#peaks[i]!;
  }

  /** Refits all blends that hold one of `touched` (all when absent), `sweeps` times over; broad profiles first in each sweep. */
  refit(sweeps: number, touched?: ReadonlySet<Component>, precision?: number): void {
    for (let sweep = 0; sweep < sweeps; sweep++) {
      this.components.sort((a, b) => a.centre - b.centre);
      const blends = blendsOf(this.components).filter((b) => !touched || b.some((c) => touched.has(c)));
      blends.sort((a, b) => widest(b) - widest(a) || a[0]!.centre - b[0]!.centre);
      const near = new Neighbours(this.components);
      for (const blend of blends) {
        const middle = blend[blend.length >> 1]!;
        fitBlend(this.data, blend, near.around(blend), this.limitsAt(middle.centre), undefined, precision);
      }
    }
    this.components.sort((a, b) => a.centre - b.centre);
    this.#neighbours = null; // widths, and with them reaches, are no longer what they were
  }

  /** To be called after a component changed its shape, and with it its reach, in place. */
  reshaped(): void {
    this.#neighbours = null;
  }

  /** Components other than those of the blend whose profiles reach into its range. */
  overlapping(blend: readonly Component[]): Component[] {
    if (this.#neighbours?.of !== this.components || this.#neighbours.size !== this.components.length)
      this.#neighbours = new Neighbours(this.components);
    return this.#neighbours.around(blend);
  }
}

const widest = (blend: readonly Component[]): number => Math.max(...blend.map((c) => c.fwhm));

/**
 * Finds what overlaps a blend without looking at every component. Made for one list of components; these may move a little afterwards,
 * which a margin allows for, but a component that comes or goes asks for a new one.
 */
class Neighbours {
  readonly size: number;
  readonly #narrow: Component[];
  readonly #centres: Float64Array;
  readonly #broad: Component[];
  readonly #reach: number;

  constructor(readonly of: readonly Component[]) {
    this.size = of.length;
    const reaches = of.map((c) => c.reach).sort((a, b) => a - b);
    const limit = reaches[Math.floor(reaches.length * 0.8)] ?? 0;
    this.#reach = 1.5 * limit;
    this.#narrow = of.filter((c) => c.reach <= limit).sort((a, b) => a.centre - b.centre);
    this.#centres = Float64Array.from(this.#narrow, (c) => c.centre);
    this.#broad = of.filter((c) => c.reach > limit);
  }

  around(blend: readonly Component[]): Component[] {
    let from = Infinity;
    let to = -Infinity;
    for (const c of blend) {
      from = Math.min(from, c.centre - c.reach);
      to = Math.max(to, c.centre + c.reach);
    }
    const reaches = (c: Component): boolean => c.centre + c.reach > from && c.centre - c.reach < to && !blend.includes(c);
    const out = this.#broad.filter(reaches);
    for (let i = indexAt(this.#centres, from - this.#reach); i < this.#narrow.length && this.#centres[i]! < to + this.#reach; i++) {
      if (reaches(this.#narrow[i]!)) out.push(this.#narrow[i]!);
    }
    return out;
  }
}

const LARGEST_BLEND = 7; // parameters fitted together; longer chains are cut at their widest gap and settled by sweeps

/** Components that must be fitted together: similar widths, closer than the sum of their half-widths times 1.6. */
export function blendsOf(sorted: readonly Component[]): Component[][] {
  const bands = new Map<number, Component[]>();
  for (const c of sorted) {
    const key = Math.round(Math.log(c.fwhm / c.centre) / Math.log(6)); // widths in velocity within about a factor of six
    const band = bands.get(key);
    if (band) band.push(c);
    else bands.set(key, [c]);
  }
  const out: Component[][] = [];
  for (const band of bands.values()) {
    let chain: Component[] = [];
    for (const c of band) {
      const last = chain[chain.length - 1];
      if (last && c.centre - last.centre > 0.8 * (c.fwhm + last.fwhm)) {
        cut(chain, out);
        chain = [];
      }
      chain.push(c);
    }
    cut(chain, out);
  }
  return out;
}

function cut(chain: Component[], out: Component[][]): void {
  if (chain.length <= LARGEST_BLEND) {
    if (chain.length) out.push(chain);
    return;
  }
  // within the middle half, so that long chains fall apart evenly
  const quarter = Math.max(2, chain.length >> 2);
  let best = quarter;
  let gap = -Infinity;
  for (let i = quarter; i <= chain.length - quarter; i++) {
    const d = (chain[i]!.centre - chain[i - 1]!.centre) / (chain[i]!.fwhm + chain[i - 1]!.fwhm);
    if (d > gap) [gap, best] = [d, i];
  }
  cut(chain.slice(0, best), out);
  cut(chain.slice(best), out);
}
