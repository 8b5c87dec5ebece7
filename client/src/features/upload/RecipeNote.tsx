import { Button } from '@mantine/core';
import { sameCorrections, withGeneral, type ReadingCorrections, type ReadingRecipe } from '@foreveil/shared';
import { IconBookmark } from '@tabler/icons-react';
import { correctionWords } from '../../components/reading/words.js';
import { recipesOf, type Entry } from './entry.js';
import classes from './upload.module.css';

interface Props {
  entry: Entry;
  recipes: readonly ReadingRecipe[];
  onRecipe: (recipe: ReadingRecipe) => void;
  /** with the corrections that stood before the recipe */
  onUndo: (before: ReadingCorrections) => void;
}

/** Says which recipe of the team a file was read by, with the way back; offers the others that are for files of its kind. */
export function RecipeNote({ entry, recipes, onRecipe, onUndo }: Props) {
  const { recipe: applied } = entry;
  const holds = (recipe: ReadingRecipe) => sameCorrections(withGeneral(entry.corrections, recipe.corrections), entry.corrections);
  const others = recipesOf(entry, recipes).filter((recipe) => recipe.name !== applied?.name && !holds(recipe));
  if (!applied && !others.length) return null;
  return (
    <div className={classes.recipe}>
      <IconBookmark size={16} aria-hidden />
      {applied && (
        <>
          <span role="status">
            Recipe <b>{applied.name}</b> applied: {correctionWords(entry.corrections).join(', ')}.
          </span>
          <Button variant="subtle" onClick={() => onUndo(applied.before)}>
            Undo
          </Button>
        </>
      )}
      {others.map((recipe) => (
        <Button
          key={recipe.id}
          variant={applied ? 'subtle' : 'default'}
          title={correctionWords(recipe.corrections).join(', ')}
          onClick={() => onRecipe(recipe)}
        >
          {applied ? `${recipe.name} instead` : `Read by the recipe ${recipe.name}`}
        </Button>
      ))}
    </div>
  );
}
