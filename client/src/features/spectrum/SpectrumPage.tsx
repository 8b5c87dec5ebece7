import { notifications } from '@mantine/notifications';
import { apiPaths, roleAllows, type AnalysisDetail } from '@foreveil/shared';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useMemo } from 'react';
import { Link, useParams } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { Simulated } from '../../components/Simulated.js';
import { isAtWork } from '../../lib/analysis-words.js';
import { errorSentence } from '../../lib/error-sentences.js';
import { pagePaths } from '../../lib/paths.js';
import { analysisQueries, cancelAnalysis, requestAnalysis, spectrumQueries } from '../../lib/queries/spectra.js';
import { day } from '../../lib/time.js';
import { useNow } from '../../lib/useNow.js';
import { lineRows } from './lines/reading.js';
import { HowDrawn } from './page/HowDrawn.js';
import { Cautions, EmptyCurve, RunNotes } from './page/RunNotes.js';
import { Workbench } from './page/Workbench.js';
import { SpectrumFacts } from './page/facts.js';
import { useSpectrumData, type SpectrumData } from './page/use-spectrum-data.js';
import { usePageSettings, type PageSettings } from './state/use-page-state.js';
import { shortTime } from './format.js';
import classes from './page/spectrum.module.css';

/** One spectrum: what it is, how it was analysed, its curve, its lines, and the argument for each. */
export default function SpectrumPage() {
  const { programmeId = '', spectrumId = '' } = useParams();
  // another spectrum is another page: its view, selection and undo start anew
  return <Page key={spectrumId} programmeId={programmeId} spectrumId={spectrumId} />;
}

function Page({ programmeId, spectrumId }: { programmeId: string; spectrumId: string }) {
  const data = useSpectrumData(programmeId, spectrumId);
  const settings = usePageSettings();
  const { spectrum, curve, analysis, identifications } = data;
  const result = analysis?.result ?? null;
  if (!spectrum) return data.error ? <Failure data={data} /> : <Waiting what="Fetching the spectrum" />;
  return (
    <div className={classes.page}>
      <Header data={data} settings={settings} />
      <div className={classes.notes}>
        <Runs data={data} programmeId={programmeId} spectrumId={spectrumId} />
        {analysis && result && (
          <Strap data={data} analysis={analysis} cautions={result.cautions} programmeId={programmeId} spectrumId={spectrumId} />
        )}
      </div>
      {data.error && !(curve && analysis !== undefined) ? (
        <Failure data={data} />
      ) : !curve || analysis === undefined ? (
        <Waiting what="Fetching samples and analysis" />
      ) : curve.wavelength.length < 2 ? (
        <EmptyCurve why="The spectrum holds fewer than two samples." />
      ) : (
        <Workbench {...{ spectrum, analysis, identifications, settings }} data={curve} role={data.role} name={data.name} />
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

interface StrapProps {
  data: SpectrumData;
  analysis: AnalysisDetail;
  cautions: readonly string[];
  programmeId: string;
  spectrumId: string;
}

/** Under the facts: what to be careful about, and which run all this comes from. */
function Strap({ data, analysis, cautions, programmeId, spectrumId }: StrapProps) {
  const run = useRun(programmeId, spectrumId);
  const mayRun = data.role !== null && roleAllows(data.role, 'analyst') && !isAtWork(data.latest);
  return (
    <div className={classes.strap}>
      <Cautions cautions={cautions} />
      <div className={classes.run}>
        <span>
          Analysed {analysis.endedAt && shortTime(analysis.endedAt)}, {analysis.lineListName} {analysis.lineListVersion}
        </span>
        {mayRun && (
          <button type="button" disabled={run.isPending} onClick={() => run.mutate()}>
            Run again
          </button>
        )}
        <a href={apiPaths.spectrumReport(programmeId, spectrumId)} download>
          Line report, CSV
        </a>
        <HowDrawn />
      </div>
    </div>
  );
}

const failed = (title: string) => (error: unknown) => void notifications.show({ title, message: errorSentence(error) });

function useRun(programmeId: string, spectrumId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => requestAnalysis(programmeId, spectrumId, {}),
    onSuccess: () => client.invalidateQueries({ queryKey: analysisQueries.list(programmeId, spectrumId).queryKey }),
    onError: failed('The analysis was not started'),
  });
}

function Runs({ data, programmeId, spectrumId }: { data: SpectrumData; programmeId: string; spectrumId: string }) {
  const client = useQueryClient();
  const run = useRun(programmeId, spectrumId);
  const now = useNow();
  const cancel = useMutation({
    mutationFn: (analysisId: string) => cancelAnalysis(programmeId, analysisId),
    onSuccess: () => client.invalidateQueries({ queryKey: spectrumQueries.all(programmeId, spectrumId) }),
    onError: failed('The analysis was not cancelled'),
  });
  if (data.analysis === undefined) return null;
  return (
    <RunNotes
      latest={data.latest}
      hasResults={data.analysis !== null}
      role={data.role}
      busy={run.isPending || cancel.isPending}
      now={now}
      onRun={() => run.mutate()}
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
