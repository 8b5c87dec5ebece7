import { Button } from '@mantine/core';
import { IconDownload } from '@tabler/icons-react';
import { useQueryClient, useSuspenseQueries, useMutation } from '@tanstack/react-query';
import { apiPaths, type ComparisonDetail } from '@foreveil/shared';
import { useState } from 'react';
import { Link, useNavigate, useParams } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { PageHead, type Fact } from '../../components/PageHead.js';
import { RoleButton } from '../../components/RoleButton.js';
import { count, fixed, signed, withError } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { comparisonQueries, deleteComparison, rerunComparison } from '../../lib/queries/comparisons.js';
import { programmeQueries, targetQueries } from '../../lib/queries/programmes.js';
import classes from './comparison.module.css';
import { saveFigure } from './export-figure.js';
import { SettingsPanel } from './SettingsPanel.js';
import { Sightlines } from './Sightlines.js';

/** Two sightlines side by side. Its address is what one shares. */
export function ComparisonPage() {
  const { programmeId = '', comparisonId = '' } = useParams();
  const [{ data: programme }, { data: targets }, { data: comparison }] = useSuspenseQueries({
    queries: [programmeQueries.detail(programmeId), targetQueries.list(programmeId), comparisonQueries.detail(programmeId, comparisonId)],
  });
  const spectra = targets.flatMap((t) => t.spectra);
  const spectrum = (id: string) => spectra.find((s) => s.id === id);
  const [a, b] = [spectrum(comparison.a.spectrumId), spectrum(comparison.b.spectrumId)];
  return (
    <>
      <PageHead
        title={comparison.name}
        tab={`${comparison.name} · ${programme.name}`}
        simulated={comparison.simulated}
        sub={
          <>
            <Link to={pagePaths.spectrum(programmeId, comparison.a.spectrumId)}>A, {comparison.a.targetName}</Link> and{' '}
            <Link to={pagePaths.spectrum(programmeId, comparison.b.spectrumId)}>B, {comparison.b.targetName}</Link>, asked for by{' '}
            {comparison.requestedBy}
          </>
        }
        facts={factsOf(comparison)}
        actions={<Actions programmeId={programmeId} comparison={comparison} role={programme.role} />}
      />
      <div className={classes.page}>
        <Notes programmeId={programmeId} comparison={comparison} />
        <SettingsPanel key={`settings of ${comparison.id}`} programmeId={programmeId} comparison={comparison} role={programme.role} />
        {comparison.result && a && b && (
          <Sightlines key={comparison.id} programmeId={programmeId} role={programme.role} comparison={comparison} a={a} b={b} />
        )}
      </div>
    </>
  );
}

function factsOf({ result, counts }: ComparisonDetail): Fact[] {
  if (!result || !counts) return [];
  const side = (name: 'a' | 'b'): Fact => ({
    label: name.toUpperCase(),
    value: `${fixed(result[name].fromNm, 0)} to ${fixed(result[name].toNm, 0)} nm`,
    note: ` R ${count(Math.round(result[name].resolvingPower))}, S/N ${count(Math.round(result[name].snr))}`,
  });
  const [shared] = result.clouds.filter((c) => c.verdict === 'shared').sort((p, q) => q.columns.length - p.columns.length);
  return [
    side('a'),
    side('b'),
    {
      label: 'Shared lines',
      value: count(counts.shared),
      note: ` of ${count(result.lines.filter((l) => l.family === 'interstellar').length)} of gas`,
    },
    ...(shared
      ? [{ label: 'Shared cloud', value: `${withError(shared.velocityKmPerS, shared.velocitySigmaKmPerS, true)}`, note: ' km/s' }]
      : []),
  ];
}

function Actions({
  programmeId,
  comparison,
  role,
}: {
  programmeId: string;
  comparison: ComparisonDetail;
  role: Parameters<typeof RoleButton>[0]['have'];
}) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const [asked, setAsked] = useState(false);
  const settle = () => client.invalidateQueries({ queryKey: comparisonQueries.all(programmeId) });
  const rerun = useMutation({
    mutationFn: () => rerunComparison(programmeId, comparison.id, {}),
    onSuccess: async (made) => {
      await settle();
      void navigate(pagePaths.comparison(programmeId, made.id));
    },
  });
  const remove = useMutation({
    mutationFn: () => deleteComparison(programmeId, comparison.id, comparison.version),
    onSuccess: async () => {
      void navigate(pagePaths.comparisons(programmeId));
      await settle();
    },
  });
  return (
    <>
      {(rerun.isError || remove.isError) && <ErrorNote error={rerun.error ?? remove.error} />}
      {comparison.result && (
        <>
          <Button
            leftSection={<IconDownload size={14} aria-hidden />}
            onClick={() => {
              const svg = document.querySelector<SVGSVGElement>('#veil');
              if (svg) saveFigure(svg, `${comparison.name}.svg`);
            }}
          >
            Figure, SVG
          </Button>
          <Button
            component="a"
            href={apiPaths.comparisonReport(programmeId, comparison.id)}
            download
            leftSection={<IconDownload size={14} aria-hidden />}
          >
            CSV
          </Button>
        </>
      )}
      <RoleButton have={role} need="analyst" onClick={() => rerun.mutate()}>
        Compare again
      </RoleButton>
      {asked ? (
        <Button variant="filled" onClick={() => remove.mutate()} onBlur={() => setAsked(false)} autoFocus>
          Delete it with its rulings?
        </Button>
      ) : (
        <RoleButton have={role} need="analyst" onClick={() => setAsked(true)}>
          Delete
        </RoleButton>
      )}
    </>
  );
}

/** What stands between the reader and the result, or what to know before trusting it. */
function Notes({ programmeId, comparison: c }: { programmeId: string; comparison: ComparisonDetail }) {
  return (
    <>
      {(c.phase === 'QUEUED' || c.phase === 'EXECUTING') && (
        <p role="status">Being compared; this page shows the result when it is there. Delete, above, stops it.</p>
      )}
      {c.phase === 'ERROR' && <p role="alert">{c.error} Compare again, above.</p>}
      {c.supersededBy && (
        <p>
          This was compared again since. <Link to={pagePaths.comparison(programmeId, c.supersededBy)}>Open the newer one</Link>
        </p>
      )}
      {c.outdated && !c.supersededBy && <p>One of the spectra was analysed again since. Compare again to take that in.</p>}
      {c.result?.cautions.map((caution) => (
        <p key={caution}>
          <b>{caution}</b>
        </p>
      ))}
      {c.result?.emission.map((e) => (
        <p key={`${e.cloud} ${e.side} ${e.velocityKmPerS}`}>
          {e.sentence} Chance that it is one gas: {signed(e.probability, 2).replace('+', '')}.
        </p>
      ))}
    </>
  );
}
