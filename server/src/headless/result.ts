import type { Analysis, Reading } from '@foreveil/shared';

/** What the reading took for granted, in words. */
function assumptions(reading: Reading): string[] {
  const out: string[] = [];
  const facts = { medium: reading.medium, frame: reading.frame, 'wavelength unit': reading.axisUnit, 'flux unit': reading.fluxUnit };
  for (const [name, fact] of Object.entries(facts)) {
    if (fact.how === 'assumed' || fact.how === 'not_stated') out.push(`${name} not stated, taken as ${fact.value || 'unknown'}`);
  }
  if (!reading.uncertaintyColumn) out.push('no error column, errors estimated from the scatter');
  if (!reading.maskColumn) out.push('no mask column');
  if (reading.resolvingPower.value === null) out.push('resolving power not stated, estimated');
  return [...out, ...reading.warnings.map((w) => w.sentence)];
}

/** One line of the command's output: wavelengths in vacuum nm, velocities in km/s, widths positive in absorption. */
export function resultLine(file: string, reading: Reading, a: Analysis, seconds: number): object {
  return {
    file,
    spectrum: {
      points: a.points,
      from_nm: a.fromNm,
      to_nm: a.toNm,
      medium: reading.medium.value,
      frame: a.frame,
      resolving_power: a.resolvingPower,
      assumptions: assumptions(reading),
    },
    continuum: {
      temperature_K: a.continuum.temperatureK,
      temperature_error_K: a.continuum.temperatureSigmaK,
      constrained: a.continuum.constrained,
    },
    systems: a.systems.map((s) => ({
      id: s.id,
      family: s.family,
      velocity_km_s: s.velocityKmPerS,
      velocity_error_km_s: s.velocitySigmaKmPerS,
      significance: s.significance,
    })),
    features: a.features.map((f) => ({
      kind: f.kind,
      wavelength_nm: f.wavelengthNm,
      wavelength_error_nm: f.wavelengthSigmaNm,
      equivalent_width_nm: f.equivalentWidthNm,
      equivalent_width_error_nm: f.equivalentWidthSigmaNm,
      fwhm_nm: f.fwhmNm,
      significance: f.significance,
      flags: f.flags,
      candidates: f.candidates.map((c) => ({
        species: c.species,
        rest_wavelength_nm: c.restNm,
        family: c.family,
        system: c.systemId,
        velocity_km_s: c.velocityKmPerS,
        probability: c.probability,
      })),
      unidentified_probability: f.unidentifiedProbability,
    })),
    program: { version: a.programVersion, line_list: a.lineListName, line_list_version: a.lineListVersion },
    seconds,
  };
}
