import type { SpeciesPresence } from '@foreveil/shared';
import { screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import { wavelengthDisplay } from '../../../lib/wavelength.js';
import { buildCurveData } from '../../../plot/curve-data.js';
import { show } from '../../../test/show.js';
import { NO_FILTER, passes } from '../lines/filters.js';
import { fromCandidate, lineRows } from '../lines/reading.js';
import { aCandidate, aResult, FEATURES, someSamples } from '../test/a-result.js';
import { EvidencePanel } from './EvidencePanel.js';
import { How, HOW, type HowTopic } from './How.js';
import { SpeciesSummary } from './SpeciesSummary.js';

const present = (species: string, systemId: string, more: Partial<SpeciesPresence> = {}): SpeciesPresence => ({
  ...{ systemId, family: 'interstellar', species, probability: 0.998, seen: 2, missing: 0, belowLimit: 1, features: 2 },
  ...{ offsetDex: 0.1, offsetSigmaDex: 0.05, sentence: `${species} is present: 2 of the 2 lines due are seen.` },
  ...more,
});

describe('the species', () => {
  const result = aResult({ species: [present('Na I', 'cloud'), present('K I', 'cloud', { probability: 0.2, seen: 0, missing: 1 })] });

  it('are told by system, with how sure each is and what its lines say; a press filters to them', async () => {
    const setFilter = vi.fn();
    show(<SpeciesSummary analysis={result} settings={{ setFilter }} />);
    await userEvent.click(screen.getByRole('button', { name: 'Species' }));
    const cloud = within(await screen.findByRole('region', { name: 'cloud cloud' }));
    expect(cloud.getByRole('heading')).toHaveTextContent('−3.98 ± 0.10 km/s');
    const [sodium, potassium] = cloud.getAllByRole('listitem');
    expect(sodium).toHaveTextContent(/0\.998\s*2 lines seen, 1 below the limit/);
    expect(potassium).toHaveTextContent(/0\.200\s*0 lines seen, 1 missing, 1 below the limit/);
    await userEvent.click(within(potassium!).getByRole('button'));
    expect(setFilter).toHaveBeenCalledWith({ system: 'cloud', text: '"K I"' });
  });

  it('in quotes are that species and no other', () => {
    const rows = lineRows(result, []);
    const named = (text: string) => rows.filter((row) => passes(row, { ...NO_FILTER, text })).map((row) => row.reading.species);
    expect(new Set(named('"Na I"'))).toEqual(new Set(['Na I']));
    expect(named('"Na"')).toEqual([]);
  });

  it('of a run of an earlier program say how to have them', async () => {
    show(<SpeciesSummary analysis={aResult()} settings={{ setFilter: vi.fn() }} />);
    await userEvent.click(screen.getByRole('button', { name: 'Species' }));
    expect(await screen.findByText(/Run it again/)).toBeInTheDocument();
  });
});

it('says what would settle a reading', () => {
  const settle = {
    ...({ why: 'not_covered', species: 'Na I', restNm: 330.3, observedNm: 330.3 } as const),
    ...{ expectedNm: 0.001, expectedSigmaNm: 0.0003, signalToNoiseTimes: null },
    sentence: 'Na I at 330.3 nm is not covered: 10 mÅ are expected there.',
  };
  const result = aResult({ features: FEATURES.map((f) => ({ ...f, candidates: [aCandidate({ settle })] })) });
  const row = lineRows(result, [])[2]!;
  const nothing = { onChoose: vi.fn(), onRemark: vi.fn(), onAct: vi.fn(), onLeaveRemark: vi.fn() };
  show(
    <EvidencePanel
      {...{ row, ...nothing, chosen: fromCandidate(row.feature.candidates[0]!), analysis: result, analysedAt: null, busy: false }}
      {...{ data: buildCurveData(someSamples(), result.continuum, result.features), display: wavelengthDisplay('nm', 'vacuum') }}
      {...{ frameName: 'baryc.', role: 'reviewer', isOld: false, remark: '', remarkId: 'remark' }}
    />,
  );
  expect(screen.getByText('What would settle it.').parentElement).toHaveTextContent(settle.sentence);
});

describe('how a number is computed', () => {
  it('has a formula, words and a source for every kind of number', () => {
    const told = Object.values(HOW).flat();
    expect(told.length).toBeGreaterThan(8);
    for (const { name, formula, words, source } of told)
      for (const text of [name, formula, words, source]) expect(text.length).toBeGreaterThan(5);
  });

  it.each(Object.keys(HOW) as HowTopic[])('opens beside the number: %s', async (topic) => {
    show(<How of={topic}>the number</How>);
    await userEvent.click(screen.getByRole('button', { name: 'the number' }));
    expect(await screen.findByText(HOW[topic][0]!.formula)).toBeInTheDocument();
  });
});
