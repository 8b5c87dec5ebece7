import type { Medium, ReadingCorrections, ReadingRecipe, TargetSummary } from '@foreveil/shared';
import { AnswerProblem } from '../../components/reading/AnswerProblem.js';
import { FileFace } from '../../components/reading/FileFace.js';
import reading from '../../components/reading/reading.module.css';
import { FRAME_WORD, MEDIUM_WORD, withCorrection } from '../../components/reading/words.js';
import { count, fileSize } from '../../lib/number.js';
import type { OffendingLine } from '../../workers/offending-lines.js';
import { NO_CORRECTIONS } from './entries.js';
import { verdict, type Entry, type TargetChoice, type Verdict } from './entry.js';
import { ReadingFacts } from './ReadingFacts.js';
import { RecipeNote } from './RecipeNote.js';
import classes from './upload.module.css';
import { VerdictColumn } from './VerdictColumn.js';

export interface BandActs {
  onCorrect: (corrections: ReadingCorrections) => void;
  onRetarget: (target: TargetChoice) => void;
  onRelabel: (label: string) => void;
  onCorrectSimilar: () => void;
  onRecipe: (recipe: ReadingRecipe) => void;
  onSend: () => void;
  onCancel: () => void;
  onLeaveOut: () => void;
}

interface Props extends BandActs {
  programmeId: string;
  targets: readonly TargetSummary[];
  recipes: readonly ReadingRecipe[];
  /** files of its kind that can still be corrected */
  similar: number;
  entry: Entry;
}

/** One file: what it looks like, what was read and how that is known, what to do. Once sent, nothing of it can be changed here. */
export function FileBand({ programmeId, targets, recipes, similar, entry, ...acts }: Props) {
  const { file, read, corrections } = entry;
  const state = verdict(entry);
  const done = DONE.has(state);
  return (
    <section className={classes.file} aria-label={file.name} data-state={state} aria-busy={state === 'reading' || undefined}>
      <div className={classes.face}>
        <h2>
          {file.name} <span>{sizeWords(entry)}</span>
        </h2>
        {read?.ok ? (
          <FileFace face={read.face} name={file.name} small={done} />
        ) : (
          <NoCurve words={read ? 'no curve: it cannot be read' : 'reading'} />
        )}
      </div>
      <BandMiddle programmeId={programmeId} targets={targets} recipes={recipes} similar={similar} entry={entry} {...acts} />
      <VerdictColumn
        programmeId={programmeId}
        entry={entry}
        {...acts}
        onMedium={(medium: Medium) => acts.onCorrect(withCorrection(corrections, 'medium', medium))}
        onTakeBack={() => acts.onCorrect(NO_CORRECTIONS)}
      />
    </section>
  );
}

/** The reading with its controls; what it was sent as, once it is sent; the lines at fault of a file that cannot be read. */
const DONE = new Set<Verdict>(['added', 'duplicate', 'known', 'twin']);

function BandMiddle({ programmeId, targets, recipes, similar, entry, ...acts }: Props) {
  const { file, read, target, label, corrections } = entry;
  const state = verdict(entry);
  if (!read?.ok) {
    return (
      <div>
        <RecipeNote entry={entry} recipes={recipes} onRecipe={acts.onRecipe} onUndo={acts.onCorrect} />
        {read?.problem.answers?.length ? (
          <div className={reading.read}>
            <dl>
              <AnswerProblem
                problem={read.problem}
                corrections={corrections}
                correct={(field, value) => acts.onCorrect(withCorrection(corrections, field, value))}
              />
            </dl>
          </div>
        ) : null}
        <Offending lines={read?.lines ?? []} />
      </div>
    );
  }
  const { medium, frame } = read.reading;
  if (DONE.has(state)) {
    return (
      <div className={classes.sent}>
        <b>{state === 'added' ? `${target.name}, ${label}` : file.name}</b>
        <span>
          {MEDIUM_WORD[medium.value]}, frame {FRAME_WORD[frame.value]}
        </span>
      </div>
    );
  }
  return (
    <fieldset disabled={state === 'sending'} className={classes.fields}>
      <legend className={classes.unseen}>What was read of {file.name}</legend>
      <ReadingFacts {...{ programmeId, entry, targets, recipes, similar }} reading={read.reading} {...acts} />
    </fieldset>
  );
}

function sizeWords({ file, read }: Entry): string {
  const points = read?.ok ? `, ${count(read.reading.points)} ${read.reading.format === 'text' ? 'rows' : 'samples'}` : '';
  return fileSize(file.size) + points;
}

const NoCurve = ({ words }: { words: string }) => (
  <div className={classes.noCurve} aria-hidden="true">
    {words}
  </div>
);

/** The lines of a text file around the one at fault. */
function Offending({ lines }: { lines: readonly OffendingLine[] }) {
  if (!lines.length) return <div />;
  return (
    <pre className={classes.offending} tabIndex={0} aria-label="The lines at fault">
      {lines.map(({ number, text, atFault }) => (
        <span key={number} data-fault={atFault || undefined}>
          <i>{number}</i>
          {text}
          {atFault ? '   ← here' : ''}
          {'\n'}
        </span>
      ))}
    </pre>
  );
}
