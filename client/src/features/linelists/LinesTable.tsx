import type { Line } from '@foreveil/shared';
import { fixed, NO_NUMBER } from '../../lib/number.js';
import { speciesName } from '../../lib/species.js';
import { useWavelengthDisplay, wavelengthDecimals } from '../../lib/wavelength.js';
import classes from './linelists.module.css';

const number = (value: number | null, decimals: number) => (value === null ? NO_NUMBER : fixed(value, decimals));

/** Lines of a list, each with its source. */
export function LinesTable({ lines, caption }: { lines: readonly Line[]; caption: string }) {
  const display = useWavelengthDisplay();
  return (
    <div className={classes.scroll} tabIndex={0} role="region" aria-label={caption}>
      <table className={classes.table}>
        <caption className={classes.unseen}>{caption}</caption>
        <thead>
          <tr>
            <th scope="col">Species</th>
            <th scope="col" className={classes.num}>
              λ at rest, {display.shortLabel}
            </th>
            <th scope="col" className={classes.num}>
              log gf
            </th>
            <th scope="col" className={classes.num}>
              E lower, cm⁻¹
            </th>
            <th scope="col" className={classes.num}>
              A, s⁻¹
            </th>
            <th scope="col">Met in</th>
            <th scope="col">Source</th>
          </tr>
        </thead>
        <tbody>
          {lines.map((line) => (
            <tr key={line.id}>
              <th scope="row">{line.type === 'forbidden' ? `[${line.species}]` : speciesName(line.species)}</th>
              <td className={classes.num}>{fixed(display.show(line.wavelengthNm), wavelengthDecimals(display.unit) + 1)}</td>
              <td className={classes.num}>{number(line.logGf, 3)}</td>
              <td className={classes.num}>{number(line.lowerEnergyPerCm, 2)}</td>
              <td className={classes.num}>{line.einsteinA === null ? NO_NUMBER : line.einsteinA.toExponential(2)}</td>
              <td>{line.settings.join(', ')}</td>
              <td className={classes.long} title={line.source}>
                {line.source}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
