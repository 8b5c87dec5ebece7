import type { TargetKind } from '@foreveil/shared';

export interface DemoSpectrum {
  readonly file: string;
  readonly targetName: string;
  readonly kind: TargetKind;
  readonly label: string;
  readonly notes: string;
}

/** Spectra computed for this demonstration. The sky has no such objects. */
export const DEMO_SPECTRA: readonly DemoSpectrum[] = [
  {
    file: 'tern-1.fits.gz',
    targetName: 'Tern 1',
    kind: 'sightline',
    label: 'Tern 1, high resolution',
    notes: 'Simulated. Hot star behind the Dunlin cloud; Tern 2 shines through the same cloud.',
  },
  {
    file: 'tern-2.fits.gz',
    targetName: 'Tern 2',
    kind: 'sightline',
    label: 'Tern 2, high resolution',
    notes: 'Simulated. Cooler star behind the Dunlin cloud and a cloud of its own.',
  },
  {
    file: 'curlew-nebula.fits.gz',
    targetName: 'Curlew Nebula',
    kind: 'nebula',
    label: 'Curlew Nebula, rim',
    notes: 'Simulated. Emission lines, with what is left of the night sky.',
  },
  {
    file: 'plover-7-ultraviolet.fits.gz',
    targetName: 'Plover 7',
    kind: 'star',
    label: 'Plover 7, ultraviolet',
    notes: 'Simulated. Resonance lines of the gas in front of a hot star.',
  },
  {
    file: 'avocet-3.fits.gz',
    targetName: 'Avocet 3',
    kind: 'star',
    label: 'Avocet 3, crowded',
    notes: 'Simulated. A cool star with hundreds of metal lines.',
  },
  {
    file: 'knot-12-survey.csv',
    targetName: 'Knot 12',
    kind: 'star',
    label: 'Knot 12, survey',
    notes: 'Simulated. Low resolution, air wavelengths, a text file.',
  },
];
