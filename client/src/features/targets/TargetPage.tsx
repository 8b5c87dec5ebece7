import { Button } from '@mantine/core';
import { useDisclosure } from '@mantine/hooks';
import { apiPaths, roleAllows, type Target } from '@foreveil/shared';
import { useSuspenseQueries } from '@tanstack/react-query';
import { Link, useParams } from 'react-router-dom';
import { PageHead, type Fact } from '../../components/PageHead.js';
import { RoleButton } from '../../components/RoleButton.js';
import { KIND_WORD } from '../../lib/kinds.js';
import { count, counted, withError } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { position } from '../../lib/position.js';
import { programmeQueries, targetQueries } from '../../lib/queries/programmes.js';
import { AgreedLines } from './AgreedLines.js';
import { EditTarget } from './EditTarget.js';
import { SpectrumRows } from './SpectrumRows.js';
import classes from './targets.module.css';

export function TargetPage() {
  const { programmeId = '', targetId = '' } = useParams();
  const [{ data: programme }, { data: target }] = useSuspenseQueries({
    queries: [programmeQueries.detail(programmeId), targetQueries.detail(programmeId, targetId)],
  });
  const [editing, { open, close }] = useDisclosure(false);
  const { role } = programme;
  const canAdd = roleAllows(role, 'analyst');
  return (
    <>
      <PageHead
        title={target.name}
        tab={`${target.name} · ${programme.name}`}
        simulated={target.simulated}
        sub={subOf(target)}
        facts={factsOf(target)}
        actions={
          <>
            <RoleButton have={role} need="analyst" onClick={open}>
              Edit facts
            </RoleButton>
            <Button component={Link} to={pagePaths.comparisons(programmeId, target.spectra[0]?.id)}>
              Compare
            </Button>
            <ReportLink programmeId={programmeId} target={target} />
            <RoleButton have={role} need="analyst" variant="filled" to={pagePaths.upload(programmeId, targetId)}>
              Add spectrum
            </RoleButton>
          </>
        }
      />
      {target.notes && <p className={classes.notes}>{target.notes}</p>}
      {target.spectra.length ? (
        <SpectrumRows programmeId={programmeId} spectra={target.spectra} identifications={target.identifications} />
      ) : (
        <p className={classes.noSpectrum}>
          No spectrum yet.{' '}
          {canAdd ? (
            <Link to={pagePaths.upload(programmeId, targetId)}>Add the first one</Link>
          ) : (
            'An analyst of the programme can add the first one.'
          )}
        </p>
      )}
      <AgreedLines programmeId={programmeId} target={target} />
      {canAdd && <EditTarget key={target.id} programmeId={programmeId} target={target} opened={editing} onClose={close} />}
    </>
  );
}

/** A plain download: the browser saves what the server sends. Without an agreed line there is nothing to report. */
function ReportLink({ programmeId, target: { id, accepted } }: { programmeId: string; target: Target }) {
  return (
    <Button
      component="a"
      href={apiPaths.targetReport(programmeId, id)}
      download
      title={`${counted(accepted, 'agreed line')} with errors, units and sources`}
    >
      Report, CSV
    </Button>
  );
}

const subOf = ({ kind, spectra, identifications }: Target): string => {
  const proposed = identifications.filter(({ state }) => state === 'proposed').length;
  const words = [KIND_WORD[kind], counted(spectra.length, 'spectrum', 'spectra')];
  if (proposed) words.push(`${counted(proposed, 'proposal')} for a reviewer`);
  return words.join(', ').replace(/^./, (letter) => letter.toUpperCase());
};

function factsOf(target: Target): Fact[] {
  const where = position(target.raDeg, target.decDeg);
  const temperature = temperatureOf(target);
  return [
    ...(where ? [{ label: 'Position, ICRS', value: where }] : []),
    ...(temperature ? [temperature] : []),
    { label: 'Agreed lines', value: count(target.accepted), note: `${count(target.rejected)} rejected, ${count(target.open)} open` },
  ];
}

/** From the newest analysis that constrains it. */
function temperatureOf({ spectra }: Target): Fact | null {
  const [best] = spectra
    .filter(({ analysis }) => analysis?.phase === 'COMPLETED' && analysis.temperatureConstrained && analysis.temperatureK !== null)
    .sort((a, b) => (b.analysis?.endedAt ?? '').localeCompare(a.analysis?.endedAt ?? ''));
  if (!best?.analysis) return null;
  return {
    label: 'Colour temperature',
    value: `${withError(best.analysis.temperatureK, best.analysis.temperatureSigmaK)} K`,
    note: best.label,
  };
}
