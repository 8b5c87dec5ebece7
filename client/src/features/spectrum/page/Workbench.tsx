import type { AnalysisDetail, AnalysisRun, Identification, MemberRole, SpectrumDetail } from '@foreveil/shared';
import { useMediaQuery } from '@mantine/hooks';
import { useCallback, useDeferredValue, useId, useMemo, useState, type KeyboardEvent } from 'react';
import { useNow } from '../../../lib/useNow.js';
import { CurveStack } from '../../../plot/CurveStack.js';
import { Overview } from '../../../plot/Overview.js';
import type { CurveData } from '../../../plot/curve-data.js';
import { CursorStore } from '../../../plot/cursor.js';
import { typesetUnit } from '../../../plot/value-axis.js';
import { ViewStore } from '../../../plot/view.js';
import { ConflictDialog } from '../decisions/ConflictDialog.js';
import { useDecisions } from '../decisions/use-decisions.js';
import { EvidencePanel } from '../evidence/EvidencePanel.js';
import { claimTitle } from '../evidence/claim-text.js';
import evidenceClasses from '../evidence/evidence.module.css';
import { LinesPanel } from '../lines/LinesPanel.js';
import { countInView, shownRows } from '../lines/filters.js';
import { dueLines, plotFeature, staves as stavesOf } from '../lines/plot-features.js';
import { lineRows } from '../lines/reading.js';
import { RegionBar } from '../region/RegionBar.js';
import { RegionStore } from '../region/region-store.js';
import { useStretches } from '../region/use-stretches.js';
import { firstView } from '../state/first-view.js';
import { isEmission } from '../state/is-emission.js';
import { summary } from '../state/spoken.js';
import { useActing } from '../state/use-acting.js';
import { useFirstWeek } from '../state/use-first-week.js';
import { useAfterFirstPaint } from '../state/use-after-first-paint.js';
import { useAnnouncer } from '../state/use-announcer.js';
import { useCommands } from '../state/use-commands.js';
import { useAddress, type PageSettings } from '../state/use-page-state.js';
import { rowAt, useSelection } from '../state/use-selection.js';
import { useSettledView } from '../state/use-settled.js';
import { SteeringPanel } from '../steering/SteeringPanel.js';
import { Unplaced } from '../steering/Unplaced.js';
import type { Steering } from '../steering/use-steering.js';
import { DeskLayout, PhoneLayout } from './layouts.js';
import { Toolbar } from './Toolbar.js';
import { FRAME_SHORT } from './facts.js';
import classes from './spectrum.module.css';

interface Props {
  spectrum: SpectrumDetail;
  data: CurveData;
  analysis: AnalysisDetail | null;
  identifications: readonly Identification[];
  role: MemberRole | null;
  /** of the person at the screen */
  name: string;
  settings: PageSettings;
  steering: Steering;
  runs: readonly AnalysisRun[];
  /** the run on the page is not the newest: to look at only */
  isOld: boolean;
  isStarting: boolean;
  onRun: () => void;
  onOpenRun: (runId: string) => void;
}

/** Curve, lines and evidence, joined by one selection, one view and one set of keys. */
export function Workbench(props: Props) {
  const { spectrum, data, analysis, identifications, role, name, settings, steering, isOld } = props;
  const { choice, mode, base, filter, opened } = settings;
  const result = analysis?.result ?? null;
  const rows = useMemo(() => (result ? lineRows(result, identifications) : []), [result, identifications]);
  const [view] = useState(() => {
    const whole = { fromNm: data.wavelength[0]!, toNm: data.wavelength.at(-1)! };
    return new ViewStore(whole, opened.range ?? firstView(data, rows, whole, window.innerWidth - 160));
  });
  const [cursor] = useState(() => new CursorStore());
  const [region] = useState(() => new RegionStore());
  const stretches = useStretches(region, steering);
  const settled = useSettledView(view);
  const selection = useSelection(rows, view, opened.lineNm);
  const { selected, chosen, hovered, select, hover } = selection;
  const shown = useMemo(() => shownRows(rows, filter, settled), [rows, filter, settled]);
  const drawnRows = useMemo(
    () => shownRows(rows, { ...filter, inView: false, sort: 'wavelength', descending: false }, settled),
    [rows, filter, settled],
  );
  const features = useMemo(() => drawnRows.map((row) => plotFeature(row, choice)), [drawnRows, choice]);
  const everyFeature = useMemo(() => rows.map((row) => plotFeature(row, choice)), [rows, choice]);
  const staves = useMemo(() => (result ? stavesOf(result, rows) : []), [result, rows]);
  const due = useMemo(() => (result ? dueLines(result, selected, choice) : []), [result, selected, choice]);
  const emission = useMemo(() => isEmission(spectrum, rows), [spectrum, rows]);
  const { message, say } = useAnnouncer();
  const remarkId = useId();
  const decisions = useDecisions({ programmeId: spectrum.programmeId, spectrumId: spectrum.id, analysisId: analysis?.id ?? '', by: name });
  const acting = useActing({ selection, decisions, rows, shown, role, isOld, display: choice, say });
  const { isOpen, open } = steering;
  const onSteer = useCallback(() => open(!isOpen), [isOpen, open]);
  const onKey = useCommands({
    data,
    view,
    cursor,
    selection,
    acting,
    rows: drawnRows,
    staves,
    display: choice,
    remarkId,
    region,
    onSteer,
    say,
  });
  useAddress(settings, settled, selected?.feature.wavelengthNm ?? null);

  const onPick = useCallback(
    (nm: number) => {
      const { fromNm, toNm } = view.get();
      const row = rowAt(drawnRows, nm, (r) => Math.max(r.feature.fwhmNm, (toNm - fromNm) / 100));
      if (row) select(row.feature.index);
    },
    [drawnRows, select, view],
  );
  const onAlone = useCallback((system: string | null) => settings.setFilter({ system }), [settings]);
  const onUndoKey = (event: KeyboardEvent) => {
    const isText = event.target instanceof HTMLInputElement || event.target instanceof HTMLTextAreaElement;
    if (isText || !(event.ctrlKey || event.metaKey) || event.shiftKey || event.key.toLowerCase() !== 'z') return;
    event.preventDefault();
    acting.undo();
  };

  const isFirstWeek = useFirstWeek(useNow());
  const isLater = useAfterFirstPaint();
  const isPhone = useMediaQuery('(max-width: 900px)', undefined, { getInitialValueInEffect: false });
  const fluxUnit = typesetUnit(spectrum.reading.fluxUnit.value);
  const spokenSummary = summary(mode === 'flux' ? 'Flux' : 'Flux over continuum', useDeferredValue(settled), rows, choice);
  const curve = (
    <div className={classes.plotLayer}>
      <div
        className={classes.plotFocus}
        role="application"
        aria-roledescription="spectrum"
        aria-label={spokenSummary}
        tabIndex={0}
        onKeyDown={onKey}
      >
        <CurveStack
          {...{ data, staves, features, due, view, cursor, mode, base, emission, fluxUnit, hovered, onPick, onAlone, stretches }}
          onDrag={(range) => region.get().dragMarks && (region.mark(range.fromNm, range.toNm), true)}
          display={choice}
          selected={selected?.feature.index ?? null}
          alone={filter.system}
          legend={isFirstWeek}
          onSelect={select}
          onHover={hover}
        />
      </div>
    </div>
  );
  const lines = isLater && result && (
    <LinesPanel
      {...{ rows: shown, settings, hovered, onKey }}
      all={rows.length}
      inView={countInView(rows, settled)}
      selected={selected?.feature.index ?? null}
      pending={decisions.pending}
      onSelect={select}
      onHover={hover}
    />
  );
  const evidence = !isLater ? null : result && selected && chosen ? (
    <EvidencePanel
      row={selected}
      chosen={chosen}
      analysis={result}
      analysedAt={analysis?.endedAt ?? null}
      data={data}
      display={choice}
      frameName={FRAME_SHORT[result.frame]}
      role={role}
      isOld={isOld}
      busy={decisions.pending.has(selected.feature.index)}
      remark={acting.remark}
      remarkId={remarkId}
      onChoose={selection.choose}
      onRemark={acting.setRemark}
      onAct={acting.act}
      onLeaveRemark={() => document.querySelector<HTMLElement>('[role="grid"]')?.focus()}
    />
  ) : (
    <NoEvidence rows={rows.length} hasResult={result !== null} />
  );

  return (
    <div style={{ display: 'contents' }} onKeyDown={onUndoKey}>
      <div className={classes.cell}>
        {analysis && !isOld && (
          <Unplaced
            programmeId={spectrum.programmeId}
            spectrumId={spectrum.id}
            analysisId={analysis.id}
            onShow={(nm) => view.reveal(nm)}
            {...{ role, selected }}
            display={choice}
          />
        )}
        <div className={classes.over}>
          <Overview
            {...{ data, view, emission }}
            features={everyFeature}
            display={choice}
            preview={spectrum.preview}
            label={`Light strip of ${spectrum.label}`}
          />
        </div>
      </div>
      <div className={classes.cell}>
        <Toolbar
          {...{ data, view, cursor, choice, mode, base, selected, region, onSteer }}
          isSteering={steering.isOpen}
          onMode={(next) => settings.set({ mode: next })}
          onBase={(next) => settings.set({ base: next })}
        />
        <RegionBar store={region} display={choice} {...{ data, selected, steering }} />
      </div>
      {isPhone ? (
        <PhoneLayout {...{ curve, lines, evidence }} claim={chosen ? claimTitle(chosen, null, choice) : ''} />
      ) : (
        <DeskLayout {...{ curve, lines, evidence }} />
      )}
      <div className={classes.unseen} role="status" aria-live="polite">
        {message}
      </div>
      <SteeringPanel
        {...{ steering, analysis, role, isOld }}
        programmeId={spectrum.programmeId}
        runs={props.runs}
        display={choice}
        busy={props.isStarting}
        onRun={props.onRun}
        onOpenRun={props.onOpenRun}
        onShow={(nm) => view.reveal(nm)}
      />
      <ConflictDialog conflict={decisions.conflict} display={choice} onKeepTheirs={decisions.keepTheirs} onApplyMine={acting.insist} />
    </div>
  );
}

function NoEvidence({ rows, hasResult }: { rows: number; hasResult: boolean }) {
  const words = !hasResult
    ? 'The argument for each line comes with an analysis.'
    : rows === 0
      ? 'The analysis found no line in this spectrum.'
      : 'Select a line to see what speaks for its reading and what against.';
  return <div className={evidenceClasses.empty}>{words}</div>;
}
