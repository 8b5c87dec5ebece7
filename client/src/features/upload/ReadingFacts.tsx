import { Button } from '@mantine/core';
import type { Reading, ReadingCorrections, ReadingRecipe, TargetSummary } from '@foreveil/shared';
import { HeaderLines } from '../../components/reading/HeaderLines.js';
import type { Correct } from '../../components/reading/field.js';
import { ReadingFields } from '../../components/reading/ReadingFields.js';
import { withCorrection } from '../../components/reading/words.js';
import { counted } from '../../lib/number.js';
import { NO_CORRECTIONS } from './entries.js';
import type { Entry, TargetChoice } from './entry.js';
import { KindActs } from './KindActs.js';
import { RecipeNote } from './RecipeNote.js';
import { LabelField, TargetField } from './TargetField.js';
import classes from './upload.module.css';

interface Props {
  programmeId: string;
  entry: Entry;
  reading: Reading;
  targets: readonly TargetSummary[];
  recipes: readonly ReadingRecipe[];
  similar: number;
  onCorrect: (corrections: ReadingCorrections) => void;
  onCorrectSimilar: () => void;
  onRecipe: (recipe: ReadingRecipe) => void;
  onRetarget: (target: TargetChoice) => void;
  onRelabel: (label: string) => void;
}

/** What was read, how that is known, and the controls that correct it; every correction reads the file again at once. */
export function ReadingFacts({ programmeId, entry, reading, targets, recipes, similar, ...acts }: Props) {
  const { corrections } = entry;
  const { onCorrect } = acts;
  const correct: Correct = (field, value) => onCorrect(withCorrection(corrections, field, value));
  const n = Object.keys(corrections).length;
  return (
    <>
      <RecipeNote entry={entry} recipes={recipes} onRecipe={acts.onRecipe} onUndo={onCorrect} />
      <ReadingFields reading={reading} correct={correct}>
        <TargetField entry={entry} targets={targets} onRetarget={acts.onRetarget} />
        <LabelField label={entry.label} onRelabel={acts.onRelabel} />
      </ReadingFields>
      <div className={classes.under}>
        {n > 0 && (
          <Button variant="subtle" onClick={() => onCorrect(NO_CORRECTIONS)}>
            Take back {counted(n, 'correction')}
          </Button>
        )}
        {n > 0 && entry.signature && (
          <KindActs
            {...{ programmeId, recipes, similar, corrections }}
            signature={entry.signature}
            onCorrectSimilar={acts.onCorrectSimilar}
          />
        )}
        <HeaderLines lines={reading.header} />
      </div>
    </>
  );
}
