import { Button } from '@mantine/core';
import { Dropzone } from '@mantine/dropzone';
import { roleAllows } from '@foreveil/shared';
import { IconDownload } from '@tabler/icons-react';
import { useSuspenseQueries } from '@tanstack/react-query';
import { useEffect, useRef } from 'react';
import { Link, useParams, useSearchParams } from 'react-router-dom';
import { PageHead, type Fact } from '../../components/PageHead.js';
import { roleReason } from '../../components/RoleButton.js';
import { takeHandedOver } from '../../lib/handed-over.js';
import { count, counted } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { recipeQueries } from '../../lib/queries/files.js';
import { programmeQueries, targetQueries } from '../../lib/queries/programmes.js';
import { similarCount, verdict, type Entry, type Verdict } from './entry.js';
import { FileBand } from './FileBand.js';
import { SendBar } from './SendBar.js';
import classes from './upload.module.css';
import { useLeaveGuard } from './useLeaveGuard.js';
import { useUploads } from './useUploads.js';

export function UploadPage() {
  const { programmeId = '' } = useParams();
  const [search] = useSearchParams();
  const [{ data: programme }, { data: targets }, { data: recipes }] = useSuspenseQueries({
    queries: [programmeQueries.detail(programmeId), targetQueries.list(programmeId), recipeQueries.list(programmeId)],
  });
  const page = targets.find(({ id }) => id === search.get('target'));
  const uploads = useUploads({ programmeId, targets, recipes, page });
  const { entries, add } = uploads;
  useLeaveGuard(entries);
  useFilesHandedOver(add);

  if (!roleAllows(programme.role, 'analyst')) {
    const back = (
      <Button component={Link} to={pagePaths.programme(programmeId)}>
        Back to {programme.name}
      </Button>
    );
    return <PageHead title="Add spectra" sub={roleReason(programme.role, 'analyst')} actions={back} />;
  }
  return (
    <>
      <PageHead
        title={titleOf(entries)}
        tab={`Add spectra · ${programme.name}`}
        simulated={programme.simulated}
        sub={
          page
            ? `They go to ${page.name} unless you name another target`
            : 'Correct what was read wrongly; the original bytes are kept as they are'
        }
        facts={standingFacts(entries)}
        actions={
          <Button component={Link} to={pagePaths.recipes(programmeId)}>
            Recipes{recipes.length ? `, ${count(recipes.length)}` : ''}
          </Button>
        }
      />
      <FileDrop empty={!entries.length} onFiles={add} />
      {entries.map((entry) => (
        <FileBand
          key={entry.id}
          programmeId={programmeId}
          targets={targets}
          recipes={recipes}
          similar={similarCount(entry, entries)}
          entry={entry}
          onCorrect={(corrections) => uploads.correct(entry, corrections)}
          onRetarget={(target) => uploads.retarget(entry, target)}
          onCorrectSimilar={() => void uploads.correctSimilar(entry)}
          onRecipe={(recipe) => uploads.applyRecipe(entry, recipe)}
          onRelabel={(label) => uploads.relabel(entry, label)}
          onSend={() => uploads.send(entry)}
          onCancel={() => uploads.cancel(entry)}
          onLeaveOut={() => uploads.leaveOut(entry)}
        />
      ))}
      {entries.length > 0 && (
        <SendBar
          entries={entries}
          programmeName={programme.name}
          onSend={(ready) => ready.forEach(uploads.send)}
          onCancel={(busy) => busy.forEach(uploads.cancel)}
        />
      )}
    </>
  );
}

const FACT_WORDS: Partial<Record<Verdict, string>> = {
  ready: 'Ready',
  asks: 'Need an answer',
  unreadable: 'Cannot be read',
  added: 'Added',
  duplicate: 'Already here',
  known: 'Here before',
  twin: 'Twice here',
  refused: 'Not added',
};

/** How many files stand where; only what there is. */
function standingFacts(entries: readonly Entry[]): Fact[] {
  return (Object.entries(FACT_WORDS) as [Verdict, string][])
    .map(([state, label]) => ({ label, n: entries.filter((entry) => verdict(entry) === state).length }))
    .filter(({ n }) => n > 0)
    .map(({ label, n }) => ({ label, value: count(n) }));
}

function titleOf(entries: readonly Entry[]): string {
  if (!entries.length) return 'Add spectra';
  const added = entries.filter((entry) => verdict(entry) === 'added').length;
  return added
    ? `${count(added)} of ${counted(entries.length, 'file')} added`
    : `${counted(entries.length, 'file')} read here, nothing sent yet`;
}

/** Files dropped on the page one came from. */
function useFilesHandedOver(add: (files: readonly File[]) => void) {
  const take = useRef(add);
  useEffect(() => {
    const files = takeHandedOver();
    if (files.length) take.current(files);
  }, []);
}

const TAKES = 'FITS tables and images, CSV, plain text, gzip; to 200 MB each.';

function FileDrop({ empty, onFiles }: { empty: boolean; onFiles: (files: File[]) => void }) {
  const choose = useRef<() => void>(null);
  const open = () => choose.current?.();
  const openFolder = () => chooseFolder(onFiles);
  return (
    <div className={classes.dropFrame}>
      <Dropzone
        onDrop={onFiles}
        className={classes.drop}
        data-empty={empty || undefined}
        openRef={choose}
        activateOnClick={false}
        enablePointerEvents
        tabIndex={-1}
        inputProps={{ 'aria-label': 'Spectrum files' }}
      >
        {empty ? (
          <div className={classes.firstDrop}>
            <p>Drop reduced spectra here, one or many, or whole folders. {TAKES}</p>
            <p>Each is read on this computer first: you see the columns, the medium and the frame before anything is sent.</p>
            <div className={classes.firstActs}>
              <Button variant="filled" onClick={open}>
                Choose files
              </Button>
              <Button onClick={openFolder}>Choose a folder</Button>
            </div>
          </div>
        ) : (
          <div className={classes.dropText}>
            <IconDownload size={18} aria-hidden />
            <span>
              Drop more files here, or{' '}
              <button type="button" className={classes.choose} onClick={open}>
                choose
              </button>{' '}
              files or{' '}
              <button type="button" className={classes.choose} onClick={openFolder}>
                a folder
              </button>
              . {TAKES}
            </span>
          </div>
        )}
      </Dropzone>
    </div>
  );
}

/** The browser's choice of a folder: all its files, those of the folders in it too. */
function chooseFolder(onFiles: (files: File[]) => void) {
  const input = document.createElement('input');
  input.type = 'file';
  input.webkitdirectory = true;
  input.onchange = () => onFiles([...(input.files ?? [])]);
  input.click();
}
