import { shifted, type Analysis, type KmPerS, type VacuumNm } from '@foreveil/shared';
import { speciesName } from '../../../lib/species.js';
import { fixed, MILLIANGSTROM_PER_NM } from '../../../lib/number.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { shownWavelength } from '../../../plot/axis-ticks.js';
import { FAMILY_WORD } from '../../../plot/marks.js';
import type { DueLine, PlotFeature, Stave } from '../../../plot/plot-feature.js';
import { UNIDENTIFIED_STAVE, type LineRow } from './reading.js';

const shown = (nm: number, display: WavelengthDisplay) => shownWavelength(nm, display, 3);

/** A row as the panels draw it. Labels of the air's many lines are bare species: their wavelengths say little. */
export function plotFeature(row: LineRow, display: WavelengthDisplay): PlotFeature {
  const { feature, reading, state, staveId } = row;
  const label =
    reading.species === null
      ? shown(feature.wavelengthNm, display)
      : reading.family === 'telluric'
        ? speciesName(reading.species)
        : `${speciesName(reading.species)} ${reading.restNm === null ? '' : shown(reading.restNm, display)}`;
  const { index, kind, wavelengthNm, fwhmNm, depth, equivalentWidthNm, damped, significance } = feature;
  return {
    ...{ index, kind, wavelengthNm, fwhmNm, depth, equivalentWidthNm },
    ...(damped && { damped }),
    ...{ family: reading.family, state, staveId, label, priority: significance },
  };
}

const ORDER = ['stellar', 'interstellar', 'nebular', 'telluric'];

/** One staff a system: star first, then clouds by velocity, nebula, air; last the unidentified, if there are any. */
export function staves(analysis: Analysis, rows: readonly LineRow[]): Stave[] {
  const systems = [...analysis.systems].sort(
    (a, b) => ORDER.indexOf(a.family) - ORDER.indexOf(b.family) || a.velocityKmPerS - b.velocityKmPerS,
  );
  const list: Stave[] = systems.map(({ id, family, velocityKmPerS }) => ({ id, family, word: FAMILY_WORD[family], velocityKmPerS }));
  if (rows.some((r) => r.staveId === UNIDENTIFIED_STAVE))
    list.push({ id: UNIDENTIFIED_STAVE, family: 'unidentified', word: FAMILY_WORD.unidentified, velocityKmPerS: null });
  return list;
}

/** Companions of the selected line that should show and do not, where they should stand. */
export function dueLines(analysis: Analysis, row: LineRow | null, display: WavelengthDisplay): DueLine[] {
  const candidate = row?.reading.candidate;
  const system = analysis.systems.find((s) => s.id === candidate?.systemId);
  if (!candidate || !system) return [];
  return candidate.companions
    .filter((c) => c.outcome === 'missing' || c.outcome === 'below_limit')
    .map((c) => {
      const due = `${fixed(c.expectedNm * MILLIANGSTROM_PER_NM, c.expectedNm < 1e-3 ? 1 : 0)} mÅ expected`;
      const why = c.outcome === 'missing' ? 'missing' : 'below the limit';
      return {
        staveId: system.id,
        nm: shifted(c.restNm as VacuumNm, system.velocityKmPerS as KmPerS),
        label: `${speciesName(c.species)} ${shown(c.restNm, display)}, ${due}, ${why}`,
      };
    });
}
