import { indexAt } from '../profiles/index.js';
import type { LineModel } from './model.js';
import type { Excess, Stretch } from './scale-space.js';

const NOTICEABLE = 0.05; // sigma of a sample: smaller changes of the model bring no excess over the threshold that was not there before

const APART = 8; // samples

/** Where a model's light has changed since it was last held. */
export class Changes {
  readonly #held: Float64Array;

  constructor(private readonly model: LineModel) {
    this.#held = new Float64Array(model.value.length);
  }

  hold(): void {
    this.#held.set(this.model.value);
  }

  /** Stretches of samples with a noticeable change, or with an excess that had to wait; sorted, those a few samples apart joined. */
  since(deferred: readonly Excess[]): Stretch[] {
    const { value, data } = this.model;
    const { wavelength, weight } = data;
    const found: [number, number][] = deferred.map((e) => [
      indexAt(wavelength, e.centre - 0.5 * e.fwhm),
      indexAt(wavelength, e.centre + 0.5 * e.fwhm) + 1,
    ]);
    let last: [number, number] | null = null;
    for (let i = 0; i < value.length; i++) {
      const d = value[i]! - this.#held[i]!;
      if (d === 0 || d * d * weight[i]! < NOTICEABLE * NOTICEABLE) continue;
      if (last && i - last[1] < APART) last[1] = i + 1;
      else found.push((last = [i, i + 1]));
    }
    found.sort((a, b) => a[0] - b[0]);
    const out: [number, number][] = [];
    for (const [from, to] of found) {
      const before = out[out.length - 1];
      if (before && from - before[1] < APART) before[1] = Math.max(before[1], to);
      else out.push([from, to]);
    }
    return out;
  }
}
