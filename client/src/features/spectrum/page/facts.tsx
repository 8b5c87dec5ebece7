import type { Analysis, Continuum, Frame, SpectrumDetail } from '@foreveil/shared';
import { Popover } from '@mantine/core';
import { count, errorParts, fixed } from '../../../lib/number.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { shownWavelength } from '../../../plot/axis-ticks.js';
import { HOW_WORD } from '../format.js';
import type { LineRow } from '../lines/reading.js';
import classes from './spectrum.module.css';

const FRAME_WORD: Record<Frame, string> = {
  topocentric: 'topocentric',
  geocentric: 'geocentric',
  heliocentric: 'heliocentric',
  barycentric: 'barycentric',
  lsrk: 'LSR (kinematic)',
  lsrd: 'LSR (dynamic)',
  source: 'rest frame of the source',
  unknown: 'frame unknown',
};

/** For the corner of a velocity axis. */
export const FRAME_SHORT: Record<Frame, string> = {
  topocentric: 'topoc.',
  geocentric: 'geoc.',
  heliocentric: 'helioc.',
  barycentric: 'baryc.',
  lsrk: 'LSR',
  lsrd: 'LSR',
  source: 'source',
  unknown: '',
};

type HowWord = keyof typeof HOW_WORD;

/** How a fact is known; bold unless the file says so. */
const How = ({ how }: { how: HowWord }) => <small data-strong={how === 'stated' ? undefined : true}>{HOW_WORD[how]}</small>;

/** A short value whose reason opens on request. */
function Explained({ children, why }: { children: string; why: string }) {
  return (
    <Popover width={340} position="bottom-end" withArrow={false}>
      <Popover.Target>
        <button type="button" className={classes.why}>
          {children}
        </button>
      </Popover.Target>
      <Popover.Dropdown>
        <p style={{ margin: 4, fontSize: 13, lineHeight: '18px' }}>{why}</p>
      </Popover.Dropdown>
    </Popover>
  );
}

const kelvin = (value: number) => `${count(Number(value.toPrecision(3)))} K`;

/** '≥ 14 500 K', '17 000–46 400 K'. */
function boundsInWords(lower: number | null, upper: number | null): string {
  if (lower !== null && upper !== null) return `${kelvin(lower).replace(' K', '')}–${kelvin(upper)}`;
  return lower !== null ? `≥ ${kelvin(lower)}` : upper !== null ? `≤ ${kelvin(upper)}` : '';
}

/** A colour temperature is given only where it is constrained; else the bound that holds, and why. */
function Temperature({ continuum }: { continuum: Continuum }) {
  const { temperatureK, temperatureSigmaK, constrained, lowerBoundK, upperBoundK, statement, model } = continuum;
  if (model === 'local' || (temperatureK === null && lowerBoundK === null && upperBoundK === null))
    return <Explained why={statement}>{model === 'local' ? 'none: local continuum' : 'not constrained'}</Explained>;
  if (constrained && temperatureK !== null) {
    const { value, sigma } = errorParts(temperatureK, temperatureSigmaK);
    return (
      <>
        {value} {sigma !== null && `± ${sigma}`} K
        <small>
          <Explained why={statement}>how</Explained>
        </small>
      </>
    );
  }
  const bounds = boundsInWords(lowerBoundK, upperBoundK);
  return (
    <>
      {bounds}
      {bounds ? ' ' : ''}
      <small data-strong>
        <Explained why={statement}>not constrained</Explained>
      </small>
    </>
  );
}

interface Props {
  spectrum: SpectrumDetail;
  analysis: Analysis | null;
  rows: readonly LineRow[];
  display: WavelengthDisplay;
}

/** What one must know before reading a number off the page, each with how it is known. */
export function SpectrumFacts({ spectrum, analysis, rows, display }: Props) {
  const { reading } = spectrum;
  const [a, b] = [shownWavelength(spectrum.fromNm, display, 2), shownWavelength(spectrum.toNm, display, 2)];
  const accepted = rows.filter((r) => r.state === 'accepted').length;
  const rejected = rows.filter((r) => r.state === 'rejected').length;
  const resolving = analysis?.resolvingPower ?? reading.resolvingPower.value;
  return (
    <dl className={classes.facts}>
      <div>
        <dt>Range</dt>
        <dd>
          {display.unit === 'wavenumber' ? `${b}–${a}` : `${a}–${b}`}
          <small>{display.shortLabel}</small>
        </dd>
      </div>
      <div>
        <dt>Medium, frame of the file</dt>
        <dd>
          {reading.medium.value}
          {reading.medium.how !== reading.frame.how && <How how={reading.medium.how} />}, {FRAME_WORD[reading.frame.value]}
          <How how={reading.frame.how} />
        </dd>
      </div>
      {resolving !== null && (
        <div>
          <dt>Resolving power</dt>
          <dd>
            {count(Number(resolving.toPrecision(3)))}
            <How how={analysis ? analysis.resolvingPowerHow : reading.resolvingPower.how} />
          </dd>
        </div>
      )}
      {analysis && (
        <>
          <div>
            <dt>S/N per pixel</dt>
            <dd>
              {fixed(analysis.snr, analysis.snr < 10 ? 1 : 0)}
              <small>
                median{analysis.noiseHow === 'stated' ? '' : analysis.noiseHow === 'estimated' ? ', noise estimated' : ', errors rescaled'}
              </small>
            </dd>
          </div>
          <div>
            <dt>Colour temperature</dt>
            <dd>
              <Temperature continuum={analysis.continuum} />
            </dd>
          </div>
          <div>
            <dt>Features accepted</dt>
            <dd>
              {accepted} of {rows.length}
              {rejected > 0 && <small>{rejected} rejected</small>}
            </dd>
          </div>
        </>
      )}
    </dl>
  );
}
