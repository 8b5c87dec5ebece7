import type { Family, FoundIdentification } from '@foreveil/shared';
import { Link } from 'react-router-dom';
import { Simulated } from '../../components/Simulated.js';
import { errorParts, fixed, MILLIANGSTROM_PER_NM, NO_NUMBER, type NumberParts } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { speciesName } from '../../lib/species.js';
import { wavelengthDecimals, type WavelengthDisplay } from '../../lib/wavelength.js';
import { Mark } from '../../plot/Mark.js';
import classes from './search.module.css';

interface Props {
  rows: readonly FoundIdentification[];
  display: WavelengthDisplay;
}

export function FoundTable({ rows, display }: Props) {
  return (
    <div className={classes.scroll} tabIndex={0} role="region" aria-label="Lines found">
      <table className={classes.table}>
        <caption className={classes.unseen}>Lines found, with where they were seen and who decided</caption>
        <thead>
          <tr>
            <th scope="col">
              <span className={classes.unseen}>State</span>
            </th>
            <th scope="col">Line</th>
            <th scope="col" className={classes.num}>
              λ measured, {display.shortLabel}
            </th>
            <th scope="col" className={classes.num} colSpan={2}>
              W, mÅ
            </th>
            <th scope="col" className={classes.num} colSpan={2}>
              v, km/s
            </th>
            <th scope="col">Target</th>
            <th scope="col">Spectrum</th>
            <th scope="col">Programme</th>
            <th scope="col">Decided by</th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <FoundRow key={row.id} row={row} display={display} />
          ))}
        </tbody>
      </table>
    </div>
  );
}

const Pair = ({ parts: { value, sigma } }: { parts: NumberParts }) => (
  <>
    <td className={classes.value}>{value}</td>
    <td className={classes.error}>{sigma && `± ${sigma}`}</td>
  </>
);

function FoundRow({ row, display }: { row: FoundIdentification; display: WavelengthDisplay }) {
  return (
    <tr>
      <td>
        <Mark family={(row.family as Family | null) ?? 'unidentified'} state={row.state} spoken />
      </td>
      <th scope="row">{row.species ? speciesName(row.species) : 'in no list'}</th>
      <td className={classes.num}>{fixed(display.show(row.wavelengthNm), wavelengthDecimals(display.unit))}</td>
      <Pair parts={errorParts(row.equivalentWidthNm * MILLIANGSTROM_PER_NM, row.equivalentWidthSigmaNm * MILLIANGSTROM_PER_NM)} />
      <Pair parts={errorParts(row.velocityKmPerS, row.velocitySigmaKmPerS, true)} />
      <td>
        <Link to={pagePaths.target(row.programmeId, row.targetId)}>{row.targetName}</Link>
      </td>
      <td>
        <Link to={pagePaths.spectrum(row.programmeId, row.spectrumId)}>{row.spectrumLabel}</Link>
      </td>
      <td>
        <Link to={pagePaths.programme(row.programmeId)}>{row.programmeName}</Link> {row.simulated && <Simulated />}
      </td>
      <td>{row.decidedBy || NO_NUMBER}</td>
    </tr>
  );
}
