import type { Line } from '@foreveil/shared';

const STAGES = ['I', 'II', 'III', 'IV', 'V', 'VI'];

/** A line made up of what a test needs; the rest is null or plain. Element and stage follow from the species. */
export function lineOf(facts: Partial<Line> & { readonly species: string }): Line {
  const [element, stage] = facts.species.split(' ');
  const wavelengthNm = facts.wavelengthNm ?? 500;
  return {
    id: `${facts.species}-${wavelengthNm}`,
    element: stage ? element! : '',
    ionStage: stage ? STAGES.indexOf(stage) + 1 : 0,
    wavelengthNm,
    type: 'allowed',
    lowerEnergyPerCm: null,
    upperEnergyPerCm: null,
    lowerJ: null,
    upperJ: null,
    logGf: null,
    oscillatorStrength: null,
    einsteinA: null,
    bandFwhmNm: null,
    settings: ['stellar'],
    multiplet: '',
    relativeIntensity: null,
    relativeIntensityScale: '',
    tier: 1,
    source: 'made up',
    ...facts,
  };
}
