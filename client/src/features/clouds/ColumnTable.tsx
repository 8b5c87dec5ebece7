import { Button } from '@mantine/core';
import type { Cloud, CloudSightline, Column } from '@foreveil/shared';
import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { fixed, NO_NUMBER, withError } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { speciesName } from '../../lib/species.js';
import classes from './clouds.module.css';

interface Props {
  cloud: Cloud;
  /** what to do where nothing is measured yet */
  suggestion: (sightline: CloudSightline) => ReactNode;
  /** null for those who may not */
  onRemove: ((sightline: CloudSightline) => void) | null;
}

/** Sightlines and their components against species. */
export function ColumnTable({ cloud, suggestion, onRemove }: Props) {
  const { programmeId, sightlines } = cloud;
  const species = [
    ...new Set(sightlines.flatMap((s) => s.measured?.components.flatMap((c) => c.columns.map((one) => one.species)) ?? [])),
  ].sort();
  return (
    <>
      <div className={classes.scroll} tabIndex={0} role="group" aria-label="Columns by sightline">
        <table>
          <thead>
            <tr>
              <th scope="col">Sightline</th>
              <th scope="col">Velocity, km/s</th>
              {species.map((name) => (
                <th key={name} scope="col">
                  log N({speciesName(name)}), cm⁻²
                </th>
              ))}
              <th scope="col">From</th>
              {onRemove && <th scope="col">Change</th>}
            </tr>
          </thead>
          <tbody>
            {sightlines.flatMap((sightline) => {
              const { spectrumId, targetName, spectrumLabel, measured } = sightline;
              const head = (
                <th scope="row">
                  <Link to={pagePaths.spectrum(programmeId, spectrumId)}>{targetName}</Link> <small>{spectrumLabel}</small>
                </th>
              );
              const remove = onRemove && (
                <td>
                  <Button size="compact-sm" aria-label={`Remove ${targetName}`} onClick={() => onRemove(sightline)}>
                    Remove
                  </Button>
                </td>
              );
              if (!measured)
                return [
                  <tr key={spectrumId}>
                    {head}
                    <td colSpan={species.length + 2}>{suggestion(sightline)}</td>
                    {remove}
                  </tr>,
                ];
              return measured.components.map((component, i) => (
                <tr key={`${spectrumId} ${i}`}>
                  {head}
                  <td className={classes.num}>{withError(component.velocityKmPerS, component.velocitySigmaKmPerS, true)}</td>
                  {species.map((name) => (
                    <ColumnCell key={name} column={component.columns.find((one) => one.species === name)?.column ?? null} />
                  ))}
                  <td>
                    <Link to={pagePaths.comparison(programmeId, measured.comparisonId)}>{measured.comparisonName}</Link>
                    {measured.outdated && ' a newer analysis exists'}
                  </td>
                  {i === 0 ? remove : onRemove && <td />}
                </tr>
              ));
            })}
          </tbody>
        </table>
      </div>
      <p className={classes.note}>
        Errors are 1σ; &lt; is a 2σ upper limit, &gt; a lower limit of a saturated line, {NO_NUMBER} not covered. Each row is one component.
      </p>
    </>
  );
}

function ColumnCell({ column }: { column: Column | null }) {
  return (
    <td className={classes.num} title={column?.sentence || undefined}>
      {columnWords(column)}
    </td>
  );
}

/** '12.04 ± 0.03', '< 10.40' for a limit, '> 13.10 saturated' for a lower limit. */
export function columnWords(column: Column | null): string {
  if (!column) return NO_NUMBER;
  if (column.method === 'limit') return `< ${fixed(column.logN, 2)}`;
  if (column.saturated) return `> ${fixed(column.logN, 2)} saturated`;
  return withError(column.logN, column.logNSigma);
}
