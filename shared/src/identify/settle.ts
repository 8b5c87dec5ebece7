import type { Line } from '../linelist/index.js';
import type { Settling } from './analysis.js';
import { MILLI_ANGSTROM, round, type Beyond } from './evidence.js';
import { offsetMoments, type LineTerm, type SpeciesState } from './offsets.js';
import type { Contender, Ranked } from './rank.js';
import { dopplerFactor, type Coverage, type FeatureView } from './views.js';

const STRONGEST = 2;
const NEARNESS = 2; // dex a natural-log unit of wavelength: a line next to the covered range is easier to get than one far off
const CERTAIN = 0.98;
const HOPELESS = 0.05;
const MUCH_MORE_LIGHT = 30; // times the signal to noise: no proposal beyond

/** Lines of each species that the data do not cover, in the order in which it would pay to observe them. Asked once a species and system. */
export class Elsewhere {
  readonly #bySpecies = new Map<string, Line[]>();
  readonly #asked = new Map<SpeciesState, Beyond[]>();

  constructor(
    lines: readonly Line[],
    readonly coverage: Coverage,
  ) {
    for (const l of lines) {
      const list = this.#bySpecies.get(l.species);
      if (list) list.push(l);
      else this.#bySpecies.set(l.species, [l]);
    }
  }

  /** The two most telling uncovered lines of a contender's species. */
  of({ state, system, expected }: Contender): readonly Beyond[] {
    let known = this.#asked.get(state);
    if (known) return known;
    const factor = dopplerFactor(system.velocity);
    const lines = (this.#bySpecies.get(expected.line.species) ?? []).filter(
      (l) => l.settings.includes(system.family) && !this.#covers(l.wavelengthNm * factor),
    );
    const logW = system.strengthOf?.(lines);
    known = lines
      .map((line, k) => ({ line, logW: logW?.[k] ?? NaN }))
      .sort((a, b) => this.#worth(b, factor) - this.#worth(a, factor) || a.line.wavelengthNm - b.line.wavelengthNm)
      .slice(0, STRONGEST);
    this.#asked.set(state, known);
    return known;
  }

  #covers(nm: number): boolean {
    return nm >= this.coverage.fromNm && nm <= this.coverage.toNm;
  }

  #worth({ line, logW }: Beyond, factor: number): number {
    const { fromNm, toNm } = this.coverage;
    const nm = line.wavelengthNm * factor;
    const strength = Number.isFinite(logW) ? logW : -9 + Math.log10((line.oscillatorStrength ?? 0) + 1e-9);
    return strength - NEARNESS * Math.max(Math.log(fromNm / nm), Math.log(nm / toNm));
  }
}

/** The companion whose observation would decide about a reading that is neither certain nor hopeless; null when there is none. */
export function settlingOf(r: Ranked, f: FeatureView, beyond: readonly Beyond[], coverage: Coverage): Settling | null {
  if (r.probability > CERTAIN || r.probability < HOPELESS) return null;
  const { contender: c } = r;
  const { mean, sigma } = offsetMoments(c.state, c.term.feature === f ? c.term : null);
  const [first] = beyond;
  if (first) return notCovered(first, c, mean, Math.hypot(sigma, c.expected.scatter));
  return tooWeak(c, mean, sigma, coverage);
}

function notCovered({ line, logW }: Beyond, c: Contender, mean: number, sigmaDex: number): Settling {
  const known = Number.isFinite(logW);
  const expectedNm = known ? 10 ** (logW + mean) : null;
  const observedNm = line.wavelengthNm * dopplerFactor(c.system.velocity);
  const due = expectedNm === null ? '' : ` with ${round(expectedNm * MILLI_ANGSTROM)} mÅ, within a factor ${(10 ** sigmaDex).toFixed(1)}`;
  return {
    why: 'not_covered',
    species: line.species,
    restNm: line.wavelengthNm,
    observedNm,
    expectedNm,
    expectedSigmaNm: expectedNm === null ? null : expectedNm * sigmaDex * Math.LN10,
    signalToNoiseTimes: null,
    sentence: `${line.species} ${line.wavelengthNm.toFixed(2)} nm, not covered, would settle it: expected at ${observedNm.toFixed(2)} nm (vacuum)${due}.`,
  };
}

/** The line nearest to showing among those that the noise drowns. */
function tooWeak(c: Contender, mean: number, sigma: number, coverage: Coverage): Settling | null {
  let best: { term: LineTerm; times: number } | null = null;
  for (const term of c.state.terms) {
    if (term === c.term || term.outcome !== 'below_limit') continue;
    const times = (coverage.threshold * 10 ** term.logMeasured) / 10 ** (term.expected.logW + mean);
    if (times > 1 && times < MUCH_MORE_LIGHT && (!best || times < best.times)) best = { term, times };
  }
  if (!best) return null;
  const { expected } = best.term;
  const { species, wavelengthNm: restNm } = expected.line;
  const expectedNm = 10 ** (expected.logW + mean);
  return {
    why: 'too_weak',
    species,
    restNm,
    observedNm: expected.wavelength,
    expectedNm,
    expectedSigmaNm: expectedNm * Math.hypot(sigma, expected.scatter) * Math.LN10,
    signalToNoiseTimes: best.times,
    sentence:
      `${species} ${restNm.toFixed(2)} nm, lost in the noise, would settle it: ${round(expectedNm * MILLI_ANGSTROM)} mÅ expected at ` +
      `${expected.wavelength.toFixed(2)} nm (vacuum), to be seen with ${best.times.toFixed(1)} times the signal to noise.`,
  };
}
