import { Button } from '@mantine/core';
import type { Family, Identification } from '@foreveil/shared';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import { counted, errorParts, fixed, MILLIANGSTROM_PER_NM, NO_NUMBER, type NumberParts } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { speciesName } from '../../lib/species.js';
import { wavelengthDecimals, type WavelengthDisplay } from '../../lib/wavelength.js';
import { Mark } from '../../plot/Mark.js';
import { widthKmPerS } from './lines-view.js';
import classes from './targets.module.css';

interface Props {
  programmeId: string;
  lines: readonly Identification[];
  display: WavelengthDisplay;
  caption: string;
}

/** Rows drawn at first; more come on request, so that thousands of lines do not hold up the page. */
const AT_ONCE = 200;

/** Decided lines with their measurements, errors and sources. */
export function LineTable({ programmeId, lines, display, caption }: Props) {
  const [most, setMost] = useState(AT_ONCE);
  return (
    <>
      <div className={classes.scroll} tabIndex={0} role="region" aria-label={caption}>
        <table className={classes.lines}>
          <caption className={classes.unseen}>{caption}</caption>
          <thead>
            <tr>
              <th scope="col">
                <span className={classes.unseen}>State</span>
              </th>
              <th scope="col">Line</th>
              <th scope="col" className={classes.num}>
                λ at rest, {display.shortLabel}
              </th>
              <th scope="col" className={classes.num} colSpan={2}>
                W, mÅ
              </th>
              <th scope="col" className={classes.num}>
                FWHM, km/s
              </th>
              <th scope="col" className={classes.num} colSpan={2}>
                v, km/s
              </th>
              <th scope="col">Seen in</th>
              <th scope="col">Decided by</th>
              <th scope="col">Source of λ and f</th>
            </tr>
          </thead>
          <tbody>
            {lines.slice(0, most).map((line) => (
              <LineRow key={line.id} programmeId={programmeId} line={line} display={display} />
            ))}
          </tbody>
        </table>
      </div>
      {lines.length > most && (
        <Button variant="subtle" onClick={() => setMost((shown) => shown + 5 * AT_ONCE)}>
          Show more, {counted(lines.length - most, 'line')} left
        </Button>
      )}
    </>
  );
}

const Pair = ({ parts: { value, sigma } }: { parts: NumberParts }) => (
  <>
    <td className={classes.value}>{value}</td>
    <td className={classes.error}>{sigma && `± ${sigma}`}</td>
  </>
);

function LineRow({ programmeId, line, display }: { programmeId: string; line: Identification; display: WavelengthDisplay }) {
  const width = errorParts(line.equivalentWidthNm * MILLIANGSTROM_PER_NM, line.equivalentWidthSigmaNm * MILLIANGSTROM_PER_NM);
  return (
    <tr>
      <td>
        <Mark family={(line.family as Family | null) ?? 'unidentified'} state={line.state} spoken />
      </td>
      <th scope="row">{line.species ? speciesName(line.species) : 'in no list'}</th>
      <td className={classes.num}>
        {line.restNm === null ? (
          <span title="where it was seen">({fixed(display.show(line.wavelengthNm), wavelengthDecimals(display.unit))})</span>
        ) : (
          fixed(display.show(line.restNm), wavelengthDecimals(display.unit))
        )}
      </td>
      <Pair parts={width} />
      <td className={classes.num}>{fixed(widthKmPerS(line), 1)}</td>
      <Pair parts={errorParts(line.velocityKmPerS, line.velocitySigmaKmPerS, true)} />
      <td>
        <Link to={pagePaths.spectrum(programmeId, line.spectrumId)}>{line.spectrumLabel}</Link>
      </td>
      <td>{line.decidedBy ?? NO_NUMBER}</td>
      <td className={classes.source} title={line.lineSource ?? undefined}>
        {line.lineSource ?? NO_NUMBER}
      </td>
    </tr>
  );
}
