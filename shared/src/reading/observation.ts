import { mjdOfIso, observerVelocity, utcOf } from '../frames/index.js';
import type { Frame } from '../spectrum/index.js';
import { assumed, notStated, stated } from './columns/medium.js';
import { corrected } from './corrections.js';
import type { Facts } from './raw.js';
import type { Reading, ReadingCorrections, ReadWarning, Stated } from './types.js';

type Observed = Pick<
  Reading,
  'observedAt' | 'time' | 'exposureS' | 'midMjdUtc' | 'site' | 'pointing' | 'observerVelocityKmPerS' | 'raDeg' | 'decDeg'
>;

/** What is known of the observation once a person has corrected it, and the velocity of the Earth's air that follows. */
export function observed(facts: Facts, frame: Frame, corrections: ReadingCorrections, warnings: ReadWarning[]): Observed {
  const time = corrected(corrections.time, facts.time);
  const exposureS = corrected(corrections.exposureS, facts.exposureS);
  const site = corrected(corrections.site, facts.site);
  const pointing = corrected(corrections.pointing, facts.pointing);
  const elapsedS = time.how === 'corrected' || exposureS.how === 'corrected' ? null : facts.elapsedS;
  const midMjdUtc = middleOf(time, elapsedS ?? exposureS.value);
  if (time.value?.scale === 'unknown')
    warnings.push({
      code: 'time_scale_unknown',
      sentence: `The time scale of the observing time (${time.where}) is not known; it was taken as UTC, which is wrong by about a minute at most.`,
    });
  return {
    observedAt: { value: time.value?.iso ?? null, how: time.how, where: time.where },
    ...{ time, exposureS, midMjdUtc, site, pointing },
    observerVelocityKmPerS: velocityOfAir(frame, midMjdUtc, site, pointing),
    raDeg: pointing.value?.raDeg ?? null,
    decDeg: pointing.value?.decDeg ?? null,
  };
}

/** The middle from the start or the end and the length; a start of unknown length is taken for the middle, and said to be assumed. */
function middleOf(time: Reading['time'], lengthS: number | null): Stated<number | null> {
  const mjd = time.value && mjdOfIso(time.value.iso);
  if (!time.value || mjd === null) return notStated(null);
  const { scale, marks } = time.value;
  const written = utcOf(mjd, scale);
  const half = (lengthS ?? 0) / 2 / 86_400;
  if (marks === 'mid') return stated(written, time.where);
  if (marks === 'unknown') return assumed(written, `${time.where}, which may mark any part of the exposure`);
  if (lengthS === null) return assumed(written, `the ${marks} of the exposure (${time.where}), whose length is not stated`);
  return stated(marks === 'start' ? written + half : written - half, `${marks} of the exposure (${time.where}) and its length`);
}

function velocityOfAir(
  frame: Frame,
  mid: Stated<number | null>,
  site: Reading['site'],
  pointing: Reading['pointing'],
): Stated<number | null> {
  if (frame === 'topocentric') return stated(0, 'topocentric frame');
  if (mid.value === null || site.value === null || pointing.value === null) return notStated(null);
  const velocity = observerVelocity(frame, { mjdUtc: mid.value, site: site.value, pointing: pointing.value });
  if (velocity === null) return notStated(null);
  const isAssumed = [mid, site, pointing].some(({ how }) => how === 'assumed');
  return (isAssumed ? assumed : stated)<number | null>(velocity, `${frame} frame, time, site and pointing`);
}
