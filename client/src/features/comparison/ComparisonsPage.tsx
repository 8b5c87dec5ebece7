import { Button, NativeSelect } from '@mantine/core';
import { useMutation, useQueryClient, useSuspenseQueries } from '@tanstack/react-query';
import { roleAllows, type ComparisonSummary, type TargetSummary } from '@foreveil/shared';
import { useState } from 'react';
import { Link, useNavigate, useParams, useSearchParams } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { PageHead } from '../../components/PageHead.js';
import { roleReason } from '../../components/RoleButton.js';
import { counted } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { comparisonQueries, createComparison } from '../../lib/queries/comparisons.js';
import { programmeQueries, targetQueries } from '../../lib/queries/programmes.js';
import { day } from '../../lib/time.js';
import classes from './comparison.module.css';

/** Comparisons of a programme, and the way to a new one. */
export function ComparisonsPage() {
  const { programmeId = '' } = useParams();
  const [{ data: programme }, { data: targets }, { data: comparisons }] = useSuspenseQueries({
    queries: [programmeQueries.detail(programmeId), targetQueries.list(programmeId), comparisonQueries.list(programmeId)],
  });
  return (
    <>
      <PageHead
        title="Comparisons"
        tab={`Comparisons · ${programme.name}`}
        sub="Two stars seen through one cloud: what stays put is the gas between"
      />
      <div className={classes.page}>
        {roleAllows(programme.role, 'analyst') ? (
          <CompareForm programmeId={programmeId} targets={targets} />
        ) : (
          <p className={classes.note}>To compare two spectra: {roleReason(programme.role, 'analyst')}</p>
        )}
        {comparisons.length ? (
          <List programmeId={programmeId} comparisons={comparisons} />
        ) : (
          <p className={classes.note}>Nothing compared yet.</p>
        )}
      </div>
    </>
  );
}

function CompareForm({ programmeId, targets }: { programmeId: string; targets: readonly TargetSummary[] }) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const [params] = useSearchParams();
  const options = targets.flatMap((t) =>
    t.spectra.filter((s) => s.analysis?.phase === 'COMPLETED').map((s) => ({ value: s.id, label: `${t.name}, ${s.label}` })),
  );
  const given = options.find((o) => o.value === params.get('a'))?.value;
  const [a, setA] = useState(given ?? options[0]?.value ?? '');
  const [b, setB] = useState(options.find((o) => o.value !== a)?.value ?? '');
  const make = useMutation({
    mutationFn: () => createComparison(programmeId, { spectrumA: a, spectrumB: b }),
    onSuccess: async (made) => {
      await client.invalidateQueries({ queryKey: comparisonQueries.all(programmeId) });
      void navigate(pagePaths.comparison(programmeId, made.id));
    },
  });
  if (options.length < 2)
    return (
      <p className={classes.note}>Comparing takes two analysed spectra; this programme has {counted(options.length, 'one', 'of them')}.</p>
    );
  return (
    <form
      className={classes.compare}
      onSubmit={(e) => {
        e.preventDefault();
        make.mutate();
      }}
    >
      <NativeSelect label="A" data={options} value={a} onChange={(e) => setA(e.currentTarget.value)} />
      <NativeSelect
        label="B"
        data={options}
        value={b}
        onChange={(e) => setB(e.currentTarget.value)}
        error={a === b ? 'Choose another spectrum than A' : undefined}
      />
      <Button type="submit" variant="filled" disabled={a === b} loading={make.isPending}>
        Compare
      </Button>
      {make.isError && <ErrorNote error={make.error} />}
    </form>
  );
}

const PHASE = { QUEUED: 'waits', EXECUTING: 'at work', COMPLETED: '', ERROR: 'stopped', ABORTED: 'stopped' } as const;

function List({ programmeId, comparisons }: { programmeId: string; comparisons: readonly ComparisonSummary[] }) {
  return (
    <div className={classes.scroll} tabIndex={0} role="group" aria-label="Comparisons made">
      <table>
        <thead>
          <tr>
            <th scope="col">Comparison</th>
            <th scope="col">Shared</th>
            <th scope="col">Only A</th>
            <th scope="col">Only B</th>
            <th scope="col">Cannot tell</th>
            <th scope="col">Asked for</th>
          </tr>
        </thead>
        <tbody>
          {comparisons.map((c) => (
            <tr key={c.id}>
              <th scope="row">
                <Link to={pagePaths.comparison(programmeId, c.id)}>{c.name}</Link> {PHASE[c.phase]} {c.outdated && 'newer analysis exists'}
              </th>
              <td className={classes.num}>{c.counts?.shared}</td>
              <td className={classes.num}>{c.counts?.['only-a']}</td>
              <td className={classes.num}>{c.counts?.['only-b']}</td>
              <td className={classes.num}>{c.counts?.['cannot-tell']}</td>
              <td>
                {c.requestedBy}, {day(c.requestedAt)}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
