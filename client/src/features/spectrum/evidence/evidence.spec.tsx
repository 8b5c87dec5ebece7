import { screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import { wavelengthDisplay } from '../../../lib/wavelength.js';
import { buildCurveData } from '../../../plot/curve-data.js';
import { show } from '../../../test/show.js';
import { anIdentification } from '../../../test/things.js';
import { choices, fromCandidate, lineRows, unidentified } from '../lines/reading.js';
import { aResult, FEATURES, someSamples } from '../test/a-result.js';
import { Argument } from './Argument.js';
import { Candidates } from './Candidates.js';
import { EvidencePanel, type EvidenceProps } from './EvidencePanel.js';
import { claimTitle, measurement } from './claim-text.js';

const display = wavelengthDisplay('nm', 'vacuum');
const sodium = FEATURES[2]!;
const result = aResult();

function panel(parts: Partial<EvidenceProps> = {}) {
  const row = lineRows(result, [])[2]!;
  const props: EvidenceProps = {
    row,
    chosen: row.reading,
    analysis: result,
    analysedAt: '2031-03-12T09:14:00Z',
    data: buildCurveData(someSamples(), result.continuum, result.features),
    display,
    frameName: 'baryc.',
    role: 'reviewer',
    isOld: false,
    busy: false,
    remark: '',
    remarkId: 'remark',
    onChoose: vi.fn(),
    onRemark: vi.fn(),
    onAct: vi.fn(),
    onLeaveRemark: vi.fn(),
    ...parts,
  };
  show(<EvidencePanel {...props} />);
  return props;
}

describe('the claim', () => {
  it('is one sentence with line, unit, place, velocity and probability', () => {
    expect(claimTitle(fromCandidate(sodium.candidates[0]!), -3.98, display)).toBe('Na I 589.1583 nm in the cloud at −3.98 km/s: 0.973');
  });
  it('is said in the unit and medium that are shown', () => {
    expect(claimTitle(fromCandidate(sodium.candidates[0]!), -3.98, wavelengthDisplay('angstrom', 'air'))).toMatch(
      /^Na I 5889\.95\d Å in the cloud/,
    );
  });
  it('says so when nothing listed fits', () => {
    expect(claimTitle(unidentified(0.68), null, display)).toBe('Not a line of the list: 0.680');
  });
  it('is followed by what was measured, each with its error and unit', () => {
    expect(measurement({ ...sodium, flags: ['blend'] }, display)).toBe(
      '589.15010 ± 0.00010 nm, W 149.70 ± 0.40 mÅ, 7.938 ± 0.051 km/s wide, blended',
    );
  });
});

describe('the argument', () => {
  it('shows five factors, each for or against', () => {
    show(<Argument candidate={sodium.candidates[0]!} />);
    const items = screen.getAllByRole('listitem');
    expect(items).toHaveLength(5);
    expect(within(items[0]!).getByRole('img', { name: 'for, odds ×20' })).toBeInTheDocument();
    expect(within(items[1]!).getByRole('img', { name: 'against, odds ÷4' })).toBeInTheDocument();
  });
});

describe('the candidates', () => {
  it('are numbered as their keys, best first, and end with u', async () => {
    const onChoose = vi.fn();
    const offered = choices(sodium);
    show(<Candidates choices={offered} chosen={offered[0]!} systems={result.systems} display={display} onChoose={onChoose} />);
    const buttons = screen.getAllByRole('button');
    expect(buttons.map((b) => b.textContent)).toEqual([
      '1Na I 589.1583cloud −3.980.973',
      '2H₂O 589.1269air +11.070.021',
      'unot in the list0.005',
    ]);
    expect(buttons.map((b) => b.getAttribute('aria-pressed'))).toEqual(['true', 'false', 'false']);
    await userEvent.click(buttons[1]!);
    expect(onChoose).toHaveBeenCalledWith(expect.objectContaining({ species: 'H2O', systemId: 'air' }));
  });
});

describe('the panel', () => {
  it('says what the factors make together', () => {
    panel();
    expect(screen.getByText('Position, width and the doublet agree with the cloud. Together the odds are 36 to 1.')).toBeInTheDocument();
  });

  it('offers a reviewer to accept or reject a proposed line', async () => {
    const { onAct } = panel();
    await userEvent.click(screen.getByRole('button', { name: /^Accept/ }));
    expect(onAct).toHaveBeenCalledWith('accept');
    expect(screen.queryByRole('button', { name: /Back to proposed/ })).toBeNull();
  });

  it('keeps what a role forbids in its place, says why, and does nothing', async () => {
    const { onAct } = panel({ role: 'analyst' });
    const accept = screen.getByRole('button', { name: /^Accept/ });
    expect(accept).toHaveAttribute('aria-disabled', 'true');
    expect(accept).toHaveAttribute('title', 'This needs the role reviewer; yours is analyst.');
    await userEvent.click(accept);
    expect(onAct).not.toHaveBeenCalled();
    await userEvent.click(screen.getByRole('button', { name: /^Propose/ }));
    expect(onAct).toHaveBeenCalledWith('propose');
  });

  it('offers only the way back on a decided line, and tells who decided and why', () => {
    const event = {
      at: '2031-03-13T16:40:00Z',
      by: 'Ben Foss',
      action: 'accept',
      from: 'proposed',
      to: 'accepted',
      reading: 'Na I 589.1583 nm',
      remark: 'Doublet fits.',
    } as const;
    const decided = anIdentification({ featureIndex: 2, lineId: 'NaI-589.158', systemId: 'cloud', history: [event] });
    const row = lineRows(result, [decided])[2]!;
    panel({ row, chosen: row.reading });
    expect(screen.getByRole('button', { name: /Back to proposed/ })).toBeEnabled();
    expect(screen.queryByRole('button', { name: /^Accept/ })).toBeNull();
    expect(screen.getByRole('list', { name: 'History' })).toHaveTextContent(/Ben Foss accepted Na I 589\.1583 nm: Doublet fits\./);
  });

  it('says in words which companions are seen, missing and not covered', () => {
    panel();
    // jsdom gives the drawing no width; its spoken form carries the same numbers
    const spoken = screen.getByRole('img', { name: /Companions in velocity space/ }).getAttribute('aria-label');
    expect(spoken).toContain('Na I 589.76 seen, 118.00 ± 0.40 mÅ');
    expect(spoken).toContain('Na I 330.30 not covered');
    expect(spoken).toContain('K I 590.10 missing, 30 mÅ due');
  });

  it('explains "unidentified" by the best that the list has', () => {
    panel({ chosen: unidentified(0.005) });
    expect(
      screen.getByText(/No listed line explains this feature well: 0\.005\. The best listed reading is Na I 589\.1583 at 0\.973/),
    ).toBeInTheDocument();
    expect(screen.queryByRole('list', { name: /Evidence/ })).toBeNull();
  });
});
