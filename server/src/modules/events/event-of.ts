import type { ProgrammeEvent } from '@foreveil/shared';
import type { Knex } from 'knex';
import { findAnalysis } from '../analyses/find-analyses.js';
import { findIdentifications } from '../identifications/find-identifications.js';
import type { Said } from './say-event.js';

/** What was said, with the row as it is now; null when the row is gone. */
export async function eventOf(db: Knex, said: Extract<Said, { programmeId: string }>): Promise<ProgrammeEvent | null> {
  switch (said.kind) {
    case 'analysis': {
      const analysis = await findAnalysis(db, said, said.id);
      return analysis && { type: 'analysis', spectrumId: analysis.spectrumId, analysis };
    }
    case 'identification': {
      const [identification] = await findIdentifications(db, said, { id: said.id });
      return identification ? { type: 'identification', identification } : null;
    }
    case 'analysis_recipes':
      return { type: 'analysis_recipes' };
    case 'comparison':
      return { type: 'comparison', comparisonId: said.id };
    case 'cloud':
      return { type: 'cloud', cloudId: said.id };
    case 'programme':
      return { type: 'programme', programmeId: said.programmeId };
    case 'spectrum': {
      const row = await db('spectra').where({ id: said.id, programme_id: said.programmeId }).first<{ target_id: string }>('target_id');
      return row ? { type: 'spectrum', spectrumId: said.id, targetId: row.target_id } : null;
    }
  }
}
