import type { Column, ComparedLine, LineMeasure, SightlineComparison } from '@foreveil/shared';

const measure = (m: LineMeasure | null) => ({
  equivalent_width_nm: m?.equivalentWidthNm ?? null,
  equivalent_width_error_nm: m?.equivalentWidthSigmaNm ?? null,
  limit_nm: m?.limitNm ?? null,
  velocity_km_s: m?.velocityKmPerS ?? null,
  velocity_error_km_s: m?.velocitySigmaKmPerS ?? null,
});

const line = (l: ComparedLine) => ({
  species: l.species,
  rest_wavelength_nm: l.restNm,
  family: l.family,
  velocity_km_s: l.velocityKmPerS,
  verdict: l.verdict,
  probability: l.probability,
  a: measure(l.a),
  b: measure(l.b),
  ratio: l.ratio,
  ratio_error: l.ratioSigma,
  velocity_difference_km_s: l.differenceKmPerS,
  velocity_difference_error_km_s: l.differenceSigmaKmPerS,
});

/** A column that stands, or nulls and the bound that holds instead. */
function column(side: 'a' | 'b', c: Column | null) {
  const stands = c !== null && c.method !== 'limit' && !c.saturated;
  return {
    [`log_n_${side}`]: stands ? c.logN : null,
    [`log_n_${side}_error`]: stands ? c.logNSigma : null,
    [`upper_limit_${side}`]: c?.method === 'limit' ? c.logN : null,
    [`lower_limit_${side}`]: c?.saturated ? c.logN : null,
    [`method_${side}`]: c?.method ?? null,
  };
}

/** The command's output: velocities in km/s on the common scale, widths in nm positive in absorption, columns as log10 cm^-2. */
export function comparisonResult(a: string, b: string, c: SightlineComparison, seconds: number): object {
  return {
    a,
    b,
    lines: c.lines.map(line),
    clouds: c.clouds.map((k) => ({
      velocity_km_s: k.velocityKmPerS,
      velocity_error_km_s: k.velocitySigmaKmPerS,
      verdict: k.verdict,
      probability: k.probability,
      columns: k.columns.map((s) => ({
        species: s.species,
        ...column('a', s.a),
        ...column('b', s.b),
        saturated: (s.a?.saturated ?? false) || (s.b?.saturated ?? false),
      })),
    })),
    emission: c.emission.map((e) => ({
      side: e.side,
      velocity_km_s: e.velocityKmPerS,
      velocity_difference_km_s: e.differenceKmPerS,
      velocity_difference_error_km_s: e.differenceSigmaKmPerS,
      probability: e.probability,
      peaks: e.peaks.length,
    })),
    cautions: c.cautions,
    program: { version: c.programVersion, line_list: c.lineListName, line_list_version: c.lineListVersion },
    seconds,
  };
}
