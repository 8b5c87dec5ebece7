import { Popover } from '@mantine/core';
import type { EvidencePart } from '@foreveil/shared';
import type { ReactNode } from 'react';
import classes from './evidence.module.css';

export type HowTopic = EvidencePart['part'] | 'measurement' | 'probability' | 'species';

interface Told {
  readonly name: string;
  readonly formula: string;
  readonly words: string;
  readonly source: string;
}

/** How the numbers come about, as the analysis computes them, and where the method is from. */
export const HOW: Record<HowTopic, readonly Told[]> = {
  position: [
    {
      name: 'Factor of the position',
      formula: 'N(Δv; 0, σ) × 60 km/s, σ² = σ_system² + σ_feature² + σ_laboratory²',
      words: 'The density of the measured place about the expected one, against a place at random within ±30 km/s. Δv is relativistic.',
      source: 'Gaussian errors in quadrature; c = 299 792.458 km/s (SI).',
    },
  ],
  strength: [
    {
      name: 'Expected equivalent width',
      formula: 'star: Saha–Boltzmann and a curve of growth; cloud: W = growth(N f λ, b); nebula: Case B and fixed ratios',
      words: 'What the physics of the family promises before the other lines of the species are asked.',
      source:
        'Solar abundances: Asplund et al. 2009; Case B: Storey & Hummer 1995; curve of growth with Voigt profiles; partition functions as listed with the line list.',
    },
    {
      name: 'Factor of the strength',
      formula: 'N(log W; log W expected, σ) × 0.55 dex',
      words: 'Agreement of measured and expected width, against widths of features at large, which spread by 0.55 dex.',
      source: 'Spread of the method’s own simulations.',
    },
  ],
  companions: [
    {
      name: 'Factor of the companions',
      formula: '[N(log W; learned) / N(log W; promised)] × (presence after / presence before)',
      words:
        'What the other lines of the species in the same system change: they set the common offset of its strengths and the chance that it shows at all. Missing ones count against it.',
      source: 'Bayes’ rule over an offset of ±2.6 dex shared by the species.',
    },
  ],
  width: [
    {
      name: 'Factor of the width',
      formula: 'density of ln FWHM in the system / density among features at large',
      words: 'Lines of one system are about equally wide in km/s; instrument and own width add in quadrature.',
      source: 'Scatter of 0.22 in ln FWHM within a system, from simulations.',
    },
  ],
  chance: [
    {
      name: 'Factor of chance',
      formula: 'what is left of p / (1 − p) after the other four',
      words: 'Rival lines at the same place, the prior odds, and the share of features that no list holds.',
      source: 'The five factors multiply to the odds of the stated probability, by construction.',
    },
  ],
  probability: [
    {
      name: 'Probability',
      formula: 'weight of draws in which the line makes ≥ 30 % of the width / weight of all draws',
      words:
        'Sets of line strengths are drawn from the predictions with their scatter, blended, and weighed by the measured width and centroid. “Not in the list” competes as a flat density.',
      source: 'Monte Carlo with fixed draws: the same data give the same number. How it was tested is linked below the candidates.',
    },
  ],
  measurement: [
    {
      name: 'Centre, FWHM, depth',
      formula: 'least squares on flux / continuum; errors from the inverse of the curvature matrix',
      words: 'Gaussian, Voigt or rotation profiles of all blended lines at once; dips multiply, peaks add.',
      source: 'Levenberg 1944; Marquardt 1963.',
    },
    {
      name: 'Equivalent width W',
      formula: 'W = depth × profile area; σ_W² = σ_fit² + (σ_continuum × 1.06 FWHM)²',
      words: 'Positive in absorption, negative in emission. The error holds that of the continuum’s placement.',
      source: 'After Vollmann & Eversberg 2006, AN 327, 862.',
    },
    {
      name: 'Significance and S/N',
      formula: 'depth / σ_depth; S/N = root mean inverse variance of the samples',
      words: 'S/N is that of the continuum, a sample. The detection threshold follows from the expected number of false features.',
      source: 'Matched filter; trials counted over the whole spectrum.',
    },
  ],
  species: [
    {
      name: 'How sure a species is',
      formula: 'the smaller of: odds of presence from all its lines; 1 − Π(1 − p) over its candidates',
      words:
        'Lines due are those stronger than the detection limit where the spectrum reaches; the factor tells how the strengths differ from the model.',
      source: 'Bayes’ rule, as for the companions.',
    },
  ],
};

/** A word that opens what stands behind its number. */
export function How({ of, children, label }: { of: HowTopic; children: ReactNode; label?: string }) {
  return (
    <Popover width={360} position="bottom-start" trapFocus withinPortal>
      <Popover.Target>
        <button type="button" className={classes.how} aria-label={label} title="How computed">
          {children}
        </button>
      </Popover.Target>
      <Popover.Dropdown>
        {HOW[of].map(({ name, formula, words, source }) => (
          <div key={name} className={classes.howText}>
            <b>{name}</b>
            <code>{formula}</code>
            <p>{words}</p>
            <p className={classes.quiet}>{source}</p>
          </div>
        ))}
      </Popover.Dropdown>
    </Popover>
  );
}
