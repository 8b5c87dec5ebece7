import type { Feature } from '@foreveil/shared';
import type { Trx } from '../../database/transaction.js';
import { reattach, type Decided } from './reattach.js';

/** Moves the decisions on a spectrum to the features of its new analysis. Their content and version stay: nobody decided anything. */
export async function reattachIdentifications(trx: Trx, spectrumId: string, features: readonly Feature[]): Promise<void> {
  const decisions = await trx('identifications')
    .where({ spectrum_id: spectrumId })
    .forUpdate()
    .select<Decided[]>({ id: 'id', kind: 'kind', wavelengthNm: 'wavelength_nm', fwhmNm: 'fwhm_nm' });
  if (!decisions.length) return;
  await trx('identifications').where({ spectrum_id: spectrumId }).update({ feature_index: null });
  for (const [id, index] of reattach(decisions, features)) await trx('identifications').where({ id }).update({ feature_index: index });
}
