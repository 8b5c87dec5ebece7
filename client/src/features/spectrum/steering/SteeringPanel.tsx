import { Button, Drawer, Tabs } from '@mantine/core';
import { useMediaQuery } from '@mantine/hooks';
import { settingsDifference, type AnalysisDetail, type AnalysisRun, type MemberRole } from '@foreveil/shared';
import { RoleButton } from '../../../components/RoleButton.js';
import { analysisWords, isAtWork } from '../../../lib/analysis-words.js';
import { counted } from '../../../lib/number.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { OLD_RUN } from '../decisions/act.js';
import { DraftList } from './DraftList.js';
import { ListChoice } from './ListChoice.js';
import { PhysicsSection } from './PhysicsSection.js';
import { Recipes } from './Recipes.js';
import { Runs } from './Runs.js';
import { SpeciesSection } from './SpeciesSection.js';
import { SystemsSection } from './SystemsSection.js';
import type { Steering } from './use-steering.js';
import { printerFor } from './words.js';
import classes from './steering.module.css';

interface Props {
  steering: Steering;
  programmeId: string;
  analysis: AnalysisDetail | null;
  runs: readonly AnalysisRun[];
  role: MemberRole | null;
  /** the run on the page is not the newest */
  isOld: boolean;
  display: WavelengthDisplay;
  busy: boolean;
  onRun: () => void;
  onOpenRun: (runId: string) => void;
  onShow: (nm: number) => void;
}

/** Beside the curve, which stays in use: what the next run is to do otherwise, and what the runs before did. */
export function SteeringPanel(props: Props) {
  const { steering, analysis, runs, programmeId, role, display } = props;
  const isPhone = useMediaQuery('(max-width: 900px)', undefined, { getInitialValueInEffect: false });
  const shown = analysis?.result ? { id: analysis.id, result: analysis.result } : null;
  return (
    <Drawer
      opened={steering.isOpen}
      onClose={() => steering.open(false)}
      title="Steer the analysis"
      position={isPhone ? 'bottom' : 'right'}
      size={isPhone ? '70%' : 440}
      withOverlay={false}
      trapFocus={false}
      lockScroll={false}
      closeOnClickOutside={false}
      closeButtonProps={{ 'aria-label': 'Close the steering panel' }}
      classNames={{ inner: classes.inner, content: classes.drawer, body: classes.body, header: classes.head, title: classes.title }}
    >
      <Tabs
        keepMounted={false}
        defaultValue="settings"
        variant="unstyled"
        classNames={{ root: classes.tabs, list: classes.tabList, tab: classes.tab, panel: classes.scroll }}
      >
        <Tabs.List>
          <Tabs.Tab value="settings">Settings</Tabs.Tab>
          <Tabs.Tab value="runs">Runs</Tabs.Tab>
        </Tabs.List>
        <Tabs.Panel value="settings" tabIndex={0}>
          <DraftList steering={steering} display={display} />
          <SystemsSection steering={steering} systems={analysis?.result?.systems ?? []} />
          <section className={classes.section}>
            <h3>Regions and features</h3>
            <p className={classes.quiet}>
              Mark a stretch on the curve: press s and e at the cursor, or “Mark” above the curve and drag. Then mask it, move the continuum
              or add a feature there. The chosen line can be split or taken out.
            </p>
          </section>
          <ListChoice steering={steering} programmeId={programmeId} used={analysis} />
          <PhysicsSection steering={steering} />
          <SpeciesSection steering={steering} />
          <Recipes steering={steering} programmeId={programmeId} role={role} />
        </Tabs.Panel>
        <Tabs.Panel value="runs" tabIndex={0}>
          <Runs {...{ programmeId, runs, shown, display }} onOpen={props.onOpenRun} onShow={props.onShow} />
        </Tabs.Panel>
      </Tabs>
      <Foot {...props} />
    </Drawer>
  );
}

/** What will change, in words, and the way to it. */
function Foot({ steering, runs, role, isOld, display, busy, onRun }: Props) {
  const { fresh, gone } = settingsDifference(steering.run, steering.draft, printerFor(display));
  const latest = runs[0] ?? null;
  const atWork = isAtWork(latest);
  const words = [fresh.length && counted(fresh.length, 'new setting'), gone.length && `${gone.length} taken back`]
    .filter(Boolean)
    .join(', ');
  return (
    <footer className={classes.foot}>
      <p role="status">
        {atWork
          ? `A run is on: ${analysisWords(latest)}.`
          : steering.isChanged
            ? `Will change: ${words || 'details of a setting'}. Decisions stay with their features.`
            : 'The next run would be like the one on the page.'}
      </p>
      <div className={classes.line}>
        {role && (
          <RoleButton
            have={role}
            need="analyst"
            closed={isOld ? OLD_RUN : undefined}
            variant="filled"
            loading={busy}
            disabled={atWork || steering.problems.length > 0}
            onClick={onRun}
          >
            Run with these settings
          </RoleButton>
        )}
        <Button disabled={!steering.canUndo} onClick={steering.undo}>
          Undo
        </Button>
        <Button disabled={!steering.isChanged} onClick={steering.revert}>
          As this run
        </Button>
        <Button onClick={steering.reset}>Defaults</Button>
      </div>
    </footer>
  );
}
