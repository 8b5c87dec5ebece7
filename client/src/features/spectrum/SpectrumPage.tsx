import { Button } from '@mantine/core';
import { apiPaths, roleAllows, settingsInWords, type AnalysisDetail } from '@foreveil/shared';
import { useMemo, useState } from 'react';
import { Link, useParams } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { Simulated } from '../../components/Simulated.js';
import { isAtWork } from '../../lib/analysis-words.js';
import { counted } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { day } from '../../lib/time.js';
import { useNow } from '../../lib/useNow.js';
import { SpeciesSummary } from './evidence/SpeciesSummary.js';
import { lineRows } from './lines/reading.js';
import { HowDrawn } from './page/HowDrawn.js';
import { Cautions, EmptyCurve, RunNotes } from './page/RunNotes.js';
import { Workbench } from './page/Workbench.js';
import { SpectrumFacts } from './page/facts.js';
import { useSpectrumData, type SpectrumData } from './page/use-spectrum-data.js';
import { usePageSettings, type PageSettings } from './state/use-page-state.js';
import { useNextList } from './steering/ListChoice.js';
import { useCancel, useRun } from './steering/use-run.js';
import { useSteering, type Steering } from './steering/use-steering.js';
import { shortTime } from './format.js';
import classes from './page/spectrum.module.css';

/** One spectrum: what it is, how it was analysed, its curve, its lines, and the argument for each. */
export default function SpectrumPage() {
  const { programmeId = '', spectrumId = '' } = useParams();
  // another spectrum is another page: its view, selection and undo start anew
  return <Page key={spectrumId} programmeId={programmeId} spectrumId={spectrumId} />;
}

function Page({ programmeId, spectrumId }: { programmeId: string; spectrumId: string }) {
  const [runId, openRun] = useState<string | null>(null);
  const data = useSpectrumData(programmeId, spectrumId, runId);
  const settings = usePageSettings();
  const steering = useSteering(data.analysis);
  const { next: nextList } = useNextList(programmeId, data.analysis, steering.lineListId);
  const run = useRun(programmeId, spectrumId, nextList?.isDefault ? undefined : nextList?.id);
  const { spectrum, curve, analysis, identifications } = data;
  const result = analysis?.result ?? null;
  if (!spectrum) return data.error ? <Failure data={data} /> : <Waiting what="Fetching the spectrum" />;
  return (
    <div className={classes.page} data-steering={steering.isOpen || undefined}>
      <Header data={data} settings={settings} />
      <div className={classes.notes}>
        <Runs data={data} steering={steering} run={run} programmeId={programmeId} spectrumId={spectrumId} />
        {data.isOld && analysis && <OldRun at={analysis.requestedAt} onLeave={() => openRun(null)} />}
        {analysis && result && (
          <Strap {...{ data, analysis, steering, run, settings, programmeId, spectrumId }} cautions={result.cautions} />
        )}
      </div>
      {data.error && !(curve && analysis !== undefined) ? (
        <Failure data={data} />
      ) : !curve || analysis === undefined ? (
        <Waiting what="Fetching samples and analysis" />
      ) : curve.wavelength.length < 2 ? (
        <EmptyCurve why="The spectrum holds fewer than two samples." />
      ) : (
        <Workbench
          {...{ spectrum, analysis, identifications, settings, steering }}
          data={curve}
          role={data.role}
          name={data.name}
          runs={data.runs}
          isOld={data.isOld}
          isStarting={run.isPending}
          onRun={() => run.mutate(steering.draft)}
          onOpenRun={openRun}
        />
      )}
    </div>
  );
}

function Header({ data, settings }: { data: SpectrumData; settings: PageSettings }) {
  const { analysis, identifications } = data;
  const spectrum = data.spectrum!;
  const result = analysis?.result ?? null;
  const rows = useMemo(() => (result ? lineRows(result, identifications) : []), [result, identifications]);
  const label = spectrum.label.startsWith(spectrum.targetName)
    ? spectrum.label.slice(spectrum.targetName.length).replace(/^[\s,:–-]+/, '')
    : spectrum.label;
  const about = [label, spectrum.instrument, spectrum.observedAt && day(spectrum.observedAt)].filter(Boolean).join(', ');
  return (
    <header className={classes.header}>
      <title>{`${spectrum.targetName}, ${spectrum.label} · Foreveil`}</title>
      <div>
        <h1>
          {spectrum.targetName} {spectrum.simulated && <Simulated />}
        </h1>
        <p className={classes.sub}>
          {about} <Link to={pagePaths.file(spectrum.programmeId, spectrum.id)}>The file and how it was read</Link>
        </p>
      </div>
      <SpectrumFacts spectrum={spectrum} analysis={result} rows={rows} display={settings.choice} />
    </header>
  );
}

type Run = ReturnType<typeof useRun>;

interface RunProps {
  data: SpectrumData;
  steering: Steering;
  run: Run;
  programmeId: string;
  spectrumId: string;
}

interface StrapProps extends RunProps {
  analysis: AnalysisDetail;
  cautions: readonly string[];
  settings: PageSettings;
}

/** Under the facts: what to be careful about, and which run all this comes from. */
function Strap({ data, analysis, cautions, steering, run, settings, programmeId, spectrumId }: StrapProps) {
  const mayRun = data.role !== null && roleAllows(data.role, 'analyst') && !isAtWork(data.latest) && !data.isOld;
  const set = settingsInWords(steering.run).length;
  return (
    <div className={classes.strap}>
      <Cautions cautions={cautions} />
      <div className={classes.run}>
        <span>
          Analysed {analysis.endedAt && shortTime(analysis.endedAt)}, {analysis.lineListName} {analysis.lineListVersion}
          {set > 0 && `, ${counted(set, 'setting')} of a person`}
        </span>
        {mayRun && (
          <button type="button" disabled={run.isPending} onClick={() => run.mutate(steering.run)}>
            Run again
          </button>
        )}
        {analysis.result && <SpeciesSummary analysis={analysis.result} settings={settings} />}
        <Link to={pagePaths.comparisons(programmeId, spectrumId)}>Compare with another star</Link>
        <a href={apiPaths.spectrumReport(programmeId, spectrumId)} download>
          Line report, CSV
        </a>
        <HowDrawn />
      </div>
    </div>
  );
}

/** An older run is looked at, not decided on. */
function OldRun({ at, onLeave }: { at: string; onLeave: () => void }) {
  return (
    <div className={classes.note} role="status">
      <b>An older run, of {shortTime(at)}.</b> <span>It can be read, not decided on: decisions belong to the newest run.</span>
      <span className={classes.push}>
        <Button onClick={onLeave}>Back to the newest run</Button>
      </span>
    </div>
  );
}

function Runs({ data, steering, run, programmeId, spectrumId }: RunProps) {
  const now = useNow();
  const cancel = useCancel(programmeId, spectrumId);
  if (data.analysis === undefined) return null;
  return (
    <RunNotes
      latest={data.latest}
      hasResults={data.analysis !== null}
      role={data.role}
      busy={run.isPending || cancel.isPending}
      now={now}
      onRun={() => run.mutate(steering.draft)}
      onCancel={() => data.latest && cancel.mutate(data.latest.id)}
    />
  );
}

function Failure({ data }: { data: SpectrumData }) {
  return (
    <div className={classes.state}>
      <ErrorNote error={data.error} onRetry={data.retry} />
    </div>
  );
}

/** Says what is awaited; the frame of the page stands already. */
function Waiting({ what }: { what: string }) {
  return (
    <div className={classes.state} role="status" aria-busy="true">
      <p>{what} …</p>
    </div>
  );
}
