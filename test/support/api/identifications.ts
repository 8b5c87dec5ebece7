import type { Api } from './api.js';
import type { Team } from './person.js';

/** Facts of an identification that a search looks at; the rest is the same for all. */
export interface Decided {
  readonly species: string | null;
  readonly wavelengthNm: number;
  readonly velocityKmPerS: number;
  readonly equivalentWidthNm: number;
  readonly state?: 'proposed' | 'accepted' | 'rejected';
  readonly targetId: string;
  readonly spectrumId: string;
}

/** Puts decisions into the table as they are, past the rules of review: for tests of what reads them. @returns their ids */
export async function decided(api: Api, { programmeId, reviewer }: Team, rows: readonly Decided[]): Promise<string[]> {
  const list = await api.db('line_lists').where({ is_default: true }).first<{ id: string }>('id');
  const line = await api.db('lines').where({ line_list_id: list.id }).first<{ line_id: string }>('line_id');
  const made = await api
    .db('identifications')
    .insert(
      rows.map(({ species, wavelengthNm, velocityKmPerS, equivalentWidthNm, state = 'accepted', targetId, spectrumId }) => ({
        ...{ programme_id: programmeId, target_id: targetId, spectrum_id: spectrumId, feature_index: null, kind: 'dip' },
        ...{ wavelength_nm: wavelengthNm, wavelength_sigma_nm: 0.0004, equivalent_width_nm: equivalentWidthNm },
        ...{ equivalent_width_sigma_nm: 0.0001, fwhm_nm: 0.01, depth: 0.4, snr: 100, flags: [], line_list_id: list.id, probability: 0.97 },
        ...(species === null
          ? {}
          : {
              ...{ line_id: line.line_id, species, rest_nm: wavelengthNm, line_source: 'made up', family: 'interstellar', system_id: 's1' },
              ...{ velocity_km_s: velocityKmPerS, velocity_sigma_km_s: 0.2 },
            }),
        ...{ state, decided_by: reviewer.userId },
      })),
    )
    .returning<{ id: string }[]>('id');
  return made.map(({ id }) => id);
}
