import type { Reading, ReadResult, Spectrum } from '@foreveil/shared';

/**
 * What is wrong with an answer of the reader; null when nothing is. A refusal has a code and a sentence of one line. A spectrum
 * that is accepted makes sense: ascending wavelengths, columns of one length, no usable sample without a value, segments that cover
 * it, statistics that are numbers, and facts that say how they are known.
 */
export function faultOf(result: ReadResult): string | null {
  if (!result.ok) {
    const { code, sentence } = result.problem;
    const isPlain = sentence.length > 0 && sentence.length <= 600 && !/[\n\r]/.test(sentence);
    return code === 'reader_fault' || !isPlain ? `${code}: ${sentence}` : null;
  }
  return columnFault(result.spectrum) ?? segmentFault(result.spectrum) ?? readingFault(result.reading, result.spectrum);
}

function columnFault({ wavelength, flux, sigma, bad }: Spectrum): string | null {
  const n = wavelength.length;
  if (n < 2 || flux.length !== n || bad.length !== n || (sigma?.length ?? n) !== n) return 'lengths';
  let good = 0;
  for (let i = 0; i < n; i++) {
    if (!(wavelength[i]! > (i === 0 ? 0 : wavelength[i - 1]!)) || !Number.isFinite(wavelength[i]!)) return `order at ${i}`;
    if (bad[i] === 1) continue;
    good++;
    if (!Number.isFinite(flux[i]!)) return `flux at ${i}`;
    if (sigma && !(sigma[i]! > 0 && sigma[i]! < Infinity)) return `sigma at ${i}`;
  }
  return good < 2 ? `${good} usable samples` : null;
}

function segmentFault({ segments = [], wavelength }: Spectrum): string | null {
  const ends = segments.map(({ to }) => to);
  const covers = segments.every(({ from, to }, i) => from === (ends[i - 1] ?? 0) && to > from) && ends.at(-1) === wavelength.length;
  return covers ? null : 'segments';
}

const HOWS: readonly string[] = ['stated', 'assumed', 'corrected', 'not_stated'];

function readingFault(reading: Reading, spectrum: Spectrum): string | null {
  const { points, axisUnit, medium, frame, site, pointing, exposureS, midMjdUtc, observerVelocityKmPerS: velocity } = reading;
  if (points < spectrum.wavelength.length) return `${points} points`;
  if (![axisUnit, medium, frame, site, pointing, exposureS, midMjdUtc, velocity].every(({ how }) => HOWS.includes(how))) return 'facts';
  // a unit that the file does not give is never taken in silence
  if (axisUnit.how === 'not_stated') return 'unit';
  if (axisUnit.how === 'assumed' && !reading.warnings.some((warning) => warning.code === 'axis_unit_assumed')) return 'unit in silence';
  if (!(reading.firstNm > 0 && reading.lastNm > 0 && Math.max(reading.firstNm, reading.lastNm) < Infinity)) return 'range';
  if (exposureS.value !== null && !(exposureS.value > 0 && exposureS.value < Infinity)) return 'exposure';
  if (site.value && !(Math.abs(site.value.latitudeDeg) <= 90 && Math.abs(site.value.longitudeDegEast) <= 180)) return 'site';
  if (pointing.value && !(pointing.value.raDeg >= 0 && pointing.value.raDeg < 360 && Math.abs(pointing.value.decDeg) <= 90))
    return 'pointing';
  if (velocity.value !== null && !(Math.abs(velocity.value) < 60)) return `air at ${velocity.value}`;
  if (spectrum.resolvingPower !== null && !(spectrum.resolvingPower > 0 && spectrum.resolvingPower < Infinity)) return 'resolving power';
  return reading.warnings.every(({ sentence }) => sentence.length > 0 && sentence.length <= 900) ? null : 'warnings';
}
