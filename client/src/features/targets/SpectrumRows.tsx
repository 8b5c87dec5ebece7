import { Progress } from '@mantine/core';
import type { Family, Identification, SpectrumSummary } from '@foreveil/shared';
import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import { PlacedStrip } from '../../components/PlacedStrip.js';
import { Folds, SpectralAxis } from '../../components/SpectralAxis.js';
import { foldAxis, placeOf, type AxisPiece } from '../../components/spectral-axis.js';
import { analysisWords, isAtWork } from '../../lib/analysis-words.js';
import { count, counted, fixed, NO_NUMBER } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { day } from '../../lib/time.js';
import { useWavelengthDisplay } from '../../lib/wavelength.js';
import classes from './targets.module.css';

interface Props {
  programmeId: string;
  spectra: readonly SpectrumSummary[];
  identifications: readonly Identification[];
}

/** Spectra of a target on one axis; stretches that none of them covers are folded. */
export function SpectrumRows({ programmeId, spectra, identifications }: Props) {
  const display = useWavelengthDisplay();
  const axis = useMemo(() => foldAxis(spectra), [spectra]);
  const agreed = useMemo(() => identifications.filter(({ state }) => state === 'accepted'), [identifications]);
  return (
    <div className={classes.frame}>
      <table className={classes.spectra}>
        <caption className={classes.unseen}>Spectra of the target</caption>
        <thead>
          <tr>
            <th scope="col" className={classes.colName}>
              {counted(spectra.length, 'spectrum', 'spectra')}
            </th>
            <th scope="col">
              <span className={classes.unseen}>Light, wavelengths in {display.shortLabel}</span>
              <div aria-hidden="true">
                <SpectralAxis axis={axis} display={display} />
              </div>
            </th>
            <th scope="col" className={`${classes.num} ${classes.colNumber}`}>
              R
            </th>
            <th scope="col" className={`${classes.num} ${classes.colNumber}`}>
              Samples
            </th>
            <th scope="col" className={classes.colAnalysis}>
              Analysis
            </th>
          </tr>
        </thead>
        <tbody>
          {spectra.map((spectrum) => (
            <SpectrumRow
              key={spectrum.id}
              programmeId={programmeId}
              spectrum={spectrum}
              agreed={agreed.filter(({ spectrumId }) => spectrumId === spectrum.id)}
              axis={axis}
            />
          ))}
        </tbody>
      </table>
    </div>
  );
}

interface RowProps {
  programmeId: string;
  spectrum: SpectrumSummary;
  agreed: readonly Identification[];
  axis: readonly AxisPiece[];
}

const STRIP_HEIGHT = 26;

function SpectrumRow({ programmeId, spectrum, agreed, axis }: RowProps) {
  const { id, label, observedAt, instrument, resolvingPower, points, fromNm, toNm, analysis } = spectrum;
  const facts = [observedAt && day(observedAt), instrument].filter(Boolean).join(', ');
  return (
    <tr>
      <th scope="row">
        <Link to={pagePaths.spectrum(programmeId, id)} className={classes.rowLink}>
          {label}
        </Link>
        <span className={classes.under}>{facts || `${fixed(fromNm, 1)}–${fixed(toNm, 1)} nm`}</span>
      </th>
      <td data-light>
        <Link to={pagePaths.spectrum(programmeId, id)} tabIndex={-1} aria-hidden="true" className={classes.light}>
          <PlacedStrip spectrum={spectrum} axis={axis} height={STRIP_HEIGHT} />
          <Folds axis={axis} />
          <AgreedTicks lines={agreed} axis={axis} />
        </Link>
      </td>
      <td data-label="R" className={classes.num}>
        {resolvingPower === null ? <span className={classes.quiet}>estimated</span> : count(resolvingPower)}
      </td>
      <td data-label="Samples" className={classes.num}>
        {count(points)}
      </td>
      <td data-label="Analysis">
        {analysisWords(analysis)}
        {analysis && isAtWork(analysis) && (
          <Progress value={analysis.progress * 100} aria-label={`Analysis of ${label}`} className={classes.progress} />
        )}
        {analysis && !isAtWork(analysis) && (
          <span className={classes.under}>
            {day(analysis.endedAt ?? analysis.requestedAt)}, {analysis.requestedBy}
          </span>
        )}
        {!analysis && <span className={classes.under}>{NO_NUMBER}</span>}
      </td>
    </tr>
  );
}

const LANES: readonly Family[] = ['stellar', 'interstellar', 'nebular', 'telluric'];

/** Agreed lines under the strip, one lane a family. */
function AgreedTicks({ lines, axis }: { lines: readonly Identification[]; axis: readonly AxisPiece[] }) {
  return (
    <svg className={classes.ticks} style={{ top: STRIP_HEIGHT + 2 }} aria-hidden="true">
      {lines.map(({ id, wavelengthNm, family }) => {
        const place = placeOf(wavelengthNm, axis);
        const lane = LANES.indexOf(family as Family);
        if (place === null || lane < 0) return null;
        const x = `${place * 100}%`;
        return <line key={id} x1={x} x2={x} y1={1 + lane * 5} y2={5 + lane * 5} stroke={`var(--${family})`} />;
      })}
    </svg>
  );
}
